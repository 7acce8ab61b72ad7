import { assessRun, findInBatch } from '@weirlight/shared/worksheet'
import type { Assessment } from '@weirlight/shared/contracts'
import type { BatchFinding, BatchView, PositionView } from '../api/batch-queries'
import { readingIn, readingProblem, replicateColumns } from './cells'

export interface LiveRow extends PositionView {
  /** of what stands in the cells now, saved or not */
  live: Assessment
}
export interface LiveBatch {
  rows: LiveRow[]
  findings: BatchFinding[]
  /** empty cells, which stop a submission, by position */
  missing: { row: PositionView; columns: string[] }[]
  read: number
  cells: number
}

const numberIn = (text: string): number | null =>
  text.trim() === '' || readingProblem(text) ? null : Number(text)

/**
 * The run sheet as it stands in the cells, computed by the same functions that the server decides with.
 */
export function liveBatch(given: {
  batch: BatchView
  textOf: (rowKey: string, columnKey: string) => string
  /** moment given to cells that have not reached the server */
  now: string
}): LiveBatch {
  const { batch, textOf, now } = given
  const columns = replicateColumns(batch.replicates)
  const assessments = assessRun(
    batch.rows.map((row) => ({
      id: row.id,
      ofPositionId: row.ofPositionId,
      kind: row.kind,
      absorbances: columns.flatMap((column) => numberIn(textOf(row.id, column)) ?? []),
      dilution: Number(row.dilution),
      expected: row.expected === null ? null : Number(row.expected),
      added: row.added === null ? null : Number(row.added),
      limits: row.limits,
      reporting: row.reporting,
    })),
    batch.rules,
  )
  const rows = batch.rows
    .map((row): LiveRow => ({ ...row, live: assessments.get(row.id) ?? row.assessment }))
    .toSorted((a, b) => a.position - b.position)
  const { findings } = findInBatch({
    positions: rows.map((row) => ({
      id: row.id,
      position: row.position,
      kind: row.kind,
      label: row.label,
      readings: columns.map((column) => {
        const absorbance = numberIn(textOf(row.id, column))
        if (absorbance === null) return null
        const saved = readingIn(row, column)
        const isSaved = saved !== null && saved.absorbance === textOf(row.id, column)
        return { absorbance, readAt: isSaved ? saved.readAt : now }
      }),
      assessment: row.live,
      holdingDueAt: row.holding?.dueAt ?? null,
    })),
    rules: batch.rules,
    colour:
      batch.colourStartedAt && batch.colourWindow
        ? { startedAt: batch.colourStartedAt, ...batch.colourWindow }
        : null,
  })
  const missing = rows
    .map((row) => ({ row, columns: columns.filter((column) => numberIn(textOf(row.id, column)) === null) }))
    .filter((each) => each.columns.length > 0)
  const cells = rows.length * columns.length
  const empty = missing.reduce((sum, each) => sum + each.columns.length, 0)
  return { rows, findings: withActions(findings, batch.findingsList), missing, read: cells - empty, cells }
}

/** What was done about a finding is kept by the server; what is found follows the cells. */
function withActions(
  found: readonly Omit<BatchFinding, 'action'>[],
  kept: BatchView['findingsList'],
): BatchFinding[] {
  const actions = new Map(kept.map((finding) => [finding.id, finding.action]))
  return found.map((finding) => ({ ...finding, action: actions.get(finding.id) ?? null }))
}

export const isUnanswered = (finding: BatchFinding) =>
  finding.severity === 'failed' && finding.action === null
