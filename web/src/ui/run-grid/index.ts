export { parseBlock } from './grid-moves'
export { RunGrid } from './run-grid'
export type { CellChange, CellState, EntryColumn, RunGridColumn, RunGridProps } from './run-grid-types'
