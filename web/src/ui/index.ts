/* The light pieces of the kit. Those that bring antd, ECharts or the grid are imported by their own path:
   ./dialogs, ./decimal-input, ./time-inputs, ./form-problem, ./run-grid, ./chart, ./upload-preview, ./tint */
export { Aligned } from './aligned'
export { Cautions } from './cautions'
export { Clock, ReadingWindow, Since } from './clock'
export { DataTable, type Column } from './data-table'
export { FilterBar, FilterDay, FilterSelect, FilterText } from './filter-bar'
export { LoadAgain, Refused } from './load-again'
export { MailAddress } from './mail-address'
export { MarginPage } from './margin-page'
export { NumberWithStory } from './number-with-story'
export {
  Empty,
  Failed,
  Forbidden,
  Loaded,
  NotFound,
  NotFoundPage,
  Progress,
  SkeletonLines,
  SkeletonPage,
} from './page-states'
export { factMark, Provenance } from './provenance'
export { SectionNav, type Section } from './section-nav'
export { SelectInput, type SelectOption } from './select-input'
export { Bar, Box, Columns, Criteria, Kbd, KeyHints, KeyValues, Strip, type MaybeFact } from './sheet'
export { Signatures } from './signatures'
export { MarkShape, StatusTag, type Mark } from './status-tag'
export { useStory, type StorySlotProps } from './story'
export { unbroken } from './unbroken'
export { UsedIn } from './used-in'
