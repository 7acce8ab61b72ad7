import type { ReactNode } from 'react'

export type SavedState = 'saved' | 'waiting' | 'saving' | 'failed'

interface ShowColumn<Row> {
  kind: 'show'
  key: string
  title: ReactNode
  unit?: string
  isNumber?: boolean
  isNarrow?: boolean
  /** left out on a phone */
  isSecondary?: boolean
  text?: (row: Row) => string | null | undefined
  cell?: (row: Row, index: number) => ReactNode
  /** puts something around an aligned number, e.g. `NumberWithStory` */
  wrap?: (row: Row, aligned: ReactNode) => ReactNode
}

export interface EntryColumn<Row> {
  kind: 'entry'
  key: string
  /** also the first half of each cell's name for screen readers */
  title: string
  unit?: string
  isEditable?: (row: Row) => boolean
  placeholder?: string
}

export type RunGridColumn<Row> = ShowColumn<Row> | EntryColumn<Row>

export interface CellChange {
  rowKey: string
  columnKey: string
  text: string
  how: 'typed' | 'pasted'
}

export interface CellState {
  saved?: SavedState | undefined
  error?: string | undefined
}

export interface RunGridProps<Row> {
  label: string
  rows: readonly Row[]
  rowKey: (row: Row) => string
  /** the second half of each cell's name, e.g. `position 5, S-26-04117` */
  rowName: (row: Row) => string
  columns: readonly RunGridColumn<Row>[]
  valueOf: (rowKey: string, columnKey: string) => string
  /** every keystroke; a paste arrives whole */
  onChange: (changes: CellChange[]) => void
  /** a changed cell was left, or a paste is done: the moment to save */
  onCommit?: (changes: CellChange[]) => void
  cellState?: (rowKey: string, columnKey: string) => CellState
  /** a sentence about what stands in a cell, shown once the cell is left */
  check?: (text: string, row: Row, columnKey: string) => string | null
  rowTone?: (row: Row) => 'qc' | undefined
  isReadOnly?: boolean
  onRowFocus?: (rowKey: string) => void
  footer?: ReactNode
}
