import type { Assessment } from '@weirlight/shared/contracts'
import { assessRun, findInBatch, type Finding } from '@weirlight/shared/worksheet'
import type { BatchWholeRow, PositionReadingRow, PositionRow } from './batch-rows.js'

export interface BatchWhole {
  batch: BatchWholeRow
  positions: readonly PositionRow[]
  /** every reading ever taken, oldest first */
  readings: readonly PositionReadingRow[]
}

export interface AssessedPosition {
  row: PositionRow
  label: string
  /** what counts, by replicate */
  readings: PositionReadingRow[]
  assessment: Assessment
}

export interface AssessedBatch {
  positions: AssessedPosition[]
  findings: Finding[]
  missingReadings: number
  summary: { positionsRead: number; aboveLimit: number; openFindings: number }
}

/** The reading that counts in each cell: the one that nothing supersedes. */
export function countingReadings(readings: readonly PositionReadingRow[]): Map<string, PositionReadingRow[]> {
  const superseded = new Set(readings.flatMap(({ supersedesId }) => supersedesId ?? []))
  const byPosition = new Map<string, PositionReadingRow[]>()
  for (const reading of readings) {
    if (superseded.has(reading.id)) continue
    const cells = byPosition.get(reading.positionId)
    if (cells) cells.push(reading)
    else byPosition.set(reading.positionId, [reading])
  }
  for (const cells of byPosition.values()) cells.sort((a, b) => a.replicate - b.replicate)
  return byPosition
}

export function labelOf(row: PositionRow, samples: ReadonlyMap<string, PositionRow>): string {
  const of = samples.get(row.ofPositionId ?? '')?.sampleNumber ?? ''
  switch (row.kind) {
    case 'blank':
      return 'Verification blank'
    case 'verification':
      return `Verification standard ${row.expected ?? ''} mg/L`
    case 'method-blank':
      return 'Method blank'
    case 'control':
      return `Control sample ${row.expected ?? ''} mg/L`
    case 'sample':
      return row.sampleNumber ?? ''
    case 'duplicate':
      return `Duplicate of ${of}`
    case 'spike':
      return `Spike of ${of}, +${row.added ?? ''} mg/L`
  }
}

/** Every position judged by the rules of the batch, and what a reviewer must be told. Pure. */
export function assessBatch({ batch, positions, readings }: BatchWhole): AssessedBatch {
  const counting = countingReadings(readings)
  const byId = new Map(positions.map((row) => [row.id, row]))
  const assessments = assessRun(
    positions.map((row) => ({
      id: row.id,
      ofPositionId: row.ofPositionId,
      kind: row.kind,
      absorbances: (counting.get(row.id) ?? []).map(({ absorbanceText }) => Number(absorbanceText)),
      dilution: Number(row.dilution),
      expected: row.expected === null ? null : Number(row.expected),
      added: row.added === null ? null : Number(row.added),
      limits: row.limits,
      reporting: row.reporting,
    })),
    batch.rules,
  )

  const assessed = positions.flatMap((row): AssessedPosition[] => {
    const assessment = assessments.get(row.id)
    if (!assessment) return []
    return [{ row, label: labelOf(row, byId), readings: counting.get(row.id) ?? [], assessment }]
  })
  const { minMinutes, maxMinutes } = batch.definition.development
  const { findings, missingReadings } = findInBatch({
    positions: assessed.map(({ row, label, readings: cells, assessment }) => ({
      id: row.id,
      position: row.position,
      kind: row.kind,
      label,
      readings: Array.from({ length: batch.replicates }, (_, index) => toCell(cells, index + 1)),
      assessment,
      holdingDueAt: row.holdingDueAt?.toISOString() ?? null,
    })),
    rules: batch.rules,
    colour: batch.colourStartedAt && {
      startedAt: batch.colourStartedAt.toISOString(),
      fromMinutes: minMinutes,
      toMinutes: maxMinutes,
    },
  })
  const answered = new Set(batch.findingActions.map(({ findingId }) => findingId))
  return {
    positions: assessed,
    findings,
    missingReadings,
    summary: {
      positionsRead: assessed.filter((one) => one.readings.length >= batch.replicates).length,
      aboveLimit: assessed.filter(({ assessment }) => isAbove(assessment.verdict)).length,
      openFindings: findings.filter(({ id }) => !answered.has(id)).length,
    },
  }
}

const isAbove = (verdict: Assessment['verdict']) => verdict === 'above' || verdict === 'conditional-above'

function toCell(cells: readonly PositionReadingRow[], replicate: number) {
  const reading = cells.find((one) => one.replicate === replicate)
  return reading ? { absorbance: Number(reading.absorbanceText), readAt: reading.readAt.toISOString() } : null
}
