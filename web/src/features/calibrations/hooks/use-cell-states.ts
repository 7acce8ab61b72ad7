import { useMemo } from 'react'
import type { ProblemError } from '../../../lib'
import type { CellState } from '../../../ui/run-grid'
import { cellName, cellText, CONCENTRATION, placeOf, type CalibrationDraft } from '../draft/calibration-draft'
import type { useCalibrationDraft } from './use-calibration-draft'

const MARK_OF_STATUS = {
  saving: 'saving',
  waiting: 'waiting',
  offline: 'waiting',
  blocked: 'waiting',
  stale: 'waiting',
  'needs-reason': 'waiting',
  failed: 'failed',
  saved: undefined,
} as const

/** Where every complaint belongs: a cell, a field of the set-up, or the strip above the sheet. */
export function useCellStates(given: {
  sheet: ReturnType<typeof useCalibrationDraft>
  submitProblem: ProblemError | null
}) {
  const { sheet, submitProblem } = given
  const { base, draft, slips, status, problem } = sheet
  const complaints = useMemo(() => {
    const cells = new Map<string, string>()
    const fields = new Map<string, string>()
    const homeless: string[] = []
    const placed = [...(problem?.errors ?? []), ...(submitProblem?.errors ?? [])]
    for (const { path, message } of placed) {
      const cell = placeOf(path, draft)
      if (cell && !isEntry(cell.columnKey)) homeless.push(`${rowWords(draft, cell.rowKey)}: ${message}`)
      else if (cell) cells.set(cellName(cell.rowKey, cell.columnKey), message)
      else if (path in draft && path !== 'standards') fields.set(path, message)
      else if (path !== 'reason') homeless.push(message)
    }
    // an empty cell of a new row is no complaint yet; the grid itself says what is wrong with a number
    for (const { path, message, cell } of slips) {
      if (cell || path === 'colourStartedAt') continue
      if (path in draft) fields.set(path, message)
      else homeless.push(message)
    }
    return { cells, fields, homeless }
  }, [draft, problem, submitProblem, slips])

  const stateOf = (rowKey: string, columnKey: string): CellState => {
    const error = complaints.cells.get(cellName(rowKey, columnKey))
    const isSame = cellText(base, rowKey, columnKey) === cellText(draft, rowKey, columnKey)
    return { error, saved: isSame ? undefined : MARK_OF_STATUS[status] }
  }
  return {
    stateOf,
    fieldError: (field: keyof CalibrationDraft) => complaints.fields.get(field) ?? null,
    homeless: complaints.homeless,
  }
}

const isEntry = (columnKey: string) => columnKey === CONCENTRATION || /^\d+$/.test(columnKey)

function rowWords(draft: CalibrationDraft, rowKey: string): string {
  const row = draft.standards.find((standard) => standard.key === rowKey)
  if (row?.role === 'second-source') return 'Second source'
  return `Standard ${row?.concentration ?? ''} mg/L`
}
