import { absorbanceText } from '@weirlight/shared/contracts'
import type { BatchView, PositionView } from '../api/batch-queries'

export interface Cell {
  rowKey: string
  columnKey: string
}
/** An entry on its way to the server. */
export interface ReadingEntry extends Cell {
  text: string
  /** the reading the person saw in the cell */
  supersedes: string | null
  reason?: string
  source: 'typed' | 'pasted'
}
export type Reading = PositionView['readings'][number]

export const cellName = (cell: Cell) => `${cell.rowKey} ${cell.columnKey}`
export const replicateColumns = (replicates: number) =>
  Array.from({ length: replicates }, (_, index) => String(index + 1))
export const columnTitle = (columnKey: string) => `A${'₁₂₃₄₅'[Number(columnKey) - 1] ?? columnKey}`

export function readingIn(row: PositionView | undefined, columnKey: string): Reading | null {
  return row?.readings.find((reading) => reading.replicate === Number(columnKey)) ?? null
}
export function rowOf(batch: BatchView, rowKey: string): PositionView | undefined {
  return batch.rows.find((row) => row.id === rowKey)
}

/** What is wrong with a reading as typed, in the words of the contract; an empty cell is not read yet. */
export function readingProblem(text: string): string | null {
  if (text.trim() === '') return null
  return absorbanceText.safeParse(text).error?.issues[0]?.message ?? null
}

/** whether an entry can be sent at all */
export const isReading = (entry: { text: string }) => readingProblem(entry.text) === null

/** How a position is called where it is spoken of alone. */
export function positionName(
  row: Pick<PositionView, 'position' | 'label' | 'sampleNumber' | 'kind'>,
): string {
  return `position ${row.position}, ${row.kind === 'sample' ? (row.sampleNumber ?? row.label) : row.label}`
}

/** the same at the head of a sentence */
export function positionTitle(row: Parameters<typeof positionName>[0]): string {
  const name = positionName(row)
  return name.charAt(0).toUpperCase() + name.slice(1)
}
