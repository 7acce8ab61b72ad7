export { ResultsList } from './components/results-list'
export { StoryById } from './components/story-page'
export { StoryDrawer } from './components/story-drawer'
export { TrendFigure } from './components/trend-figure'
export {
  determinationOf,
  findingOf,
  flagWords,
  isAbove,
  shownNumber,
  trendWords,
  usualForm,
  withUnit,
} from './result-words'
export type { FormCode, ResultRow, Trend } from './api/result-queries'
