import type { BatchView, PositionView, batchRow, correctionView } from '@weirlight/shared/contracts'
import type { z } from 'zod'
import { holdingAt } from '../samples/index.js'
import type { AssessedBatch, AssessedPosition, BatchWhole } from './assess-batch.js'
import type { BatchListRow, DilutionChangeRow, PositionRow } from './batch-rows.js'

export function toRow(row: BatchListRow): z.input<typeof batchRow> {
  const { openedBy, openedByName, positionsRead, openFindings, openedAt, submittedAt, releasedAt, ...plain } =
    row
  return {
    ...plain,
    openedBy: { id: openedBy, name: openedByName },
    openedAt: openedAt.toISOString(),
    submittedAt: submittedAt?.toISOString() ?? null,
    releasedAt: releasedAt?.toISOString() ?? null,
    read: positionsRead,
    findings: openFindings,
    reviewDueAt: row.reviewDueAt?.toISOString() ?? null,
  }
}

export function toView(input: {
  whole: BatchWhole
  assessed: AssessedBatch
  dilutionChanges: readonly DilutionChangeRow[]
  signatures: BatchView['signatures']
  alsoHere: readonly string[]
  at: Date
}): BatchView {
  const { whole, assessed, at } = input
  const { batch } = whole
  const { definition, calibrationValidUntil, colourStartedAt, findingActions, ...row } = batch
  const { minMinutes, maxMinutes } = definition.development
  const { peakNm, widthShortNm, widthLongNm } = definition.band
  const positionOf = new Map(whole.positions.map((one) => [one.id, one]))
  const actions = new Map(findingActions.map(({ findingId, ...action }) => [findingId, action]))
  return {
    ...row,
    ...toRow({ ...batch, ...assessed.summary }),
    wavelengthNm: definition.wavelengthNm,
    calibrationValidUntil: calibrationValidUntil?.toISOString() ?? null,
    colourWindow: { fromMinutes: minMinutes, toMinutes: maxMinutes },
    band: { peakNm, widthShortNm, widthLongNm },
    cautions: definition.cautions.map(({ hazard, text }) => `${hazard}: ${text}`),
    rows: assessed.positions.map((one) => ({
      ...toPosition(one, positionOf, at),
      colourStartedAt: colourStartedAt?.toISOString() ?? null,
    })),
    findingsList: assessed.findings.map((finding) => ({
      ...finding,
      action: actions.get(finding.id) ?? null,
    })),
    corrections: corrections(whole, input.dilutionChanges),
    signatures: input.signatures,
    colourStartedAt: colourStartedAt?.toISOString() ?? null,
    alsoHere: [...input.alsoHere],
  }
}

function toPosition(
  { row, label, readings, assessment }: AssessedPosition,
  positionOf: ReadonlyMap<string, PositionRow>,
  at: Date,
): Omit<PositionView, 'colourStartedAt'> {
  const { collectedAt, holdingDueAt, holdingRule, soonWithinHours, ...plain } = row
  const lastRead = Math.max(...readings.map(({ readAt }) => readAt.getTime()))
  const holding =
    collectedAt && holdingDueAt
      ? holdingAt({
          collectedAt,
          dueAt: holdingDueAt,
          ruleText: holdingRule ?? '',
          soonWithinHours,
          // it stops when the sample is read
          at: readings.length > 0 ? new Date(lastRead) : at,
        })
      : null
  return {
    ...plain,
    label,
    ofPosition: positionOf.get(row.ofPositionId ?? '')?.position ?? null,
    holding,
    readings: readings.map((reading) => ({
      id: reading.id,
      replicate: reading.replicate,
      absorbance: reading.absorbanceText,
      readAt: reading.readAt.toISOString(),
      readBy: { id: reading.readBy, name: reading.readByName },
      source: reading.source,
      corrected: reading.supersedesId !== null,
    })),
    assessment,
  }
}

/** What was changed by hand after it was first entered, oldest first. */
function corrections(
  { positions, readings }: BatchWhole,
  dilutionChanges: readonly DilutionChangeRow[],
): z.infer<typeof correctionView>[] {
  const byId = new Map(readings.map((reading) => [reading.id, reading]))
  const numberOf = new Map(positions.map(({ id, position }) => [id, position]))
  const ofReadings = readings.flatMap((reading) => {
    const before = byId.get(reading.supersedesId ?? '')
    if (!before) return []
    return [
      {
        what: `Position ${numberOf.get(reading.positionId) ?? ''}, reading ${reading.replicate}`,
        from: before.absorbanceText,
        to: reading.absorbanceText,
        by: reading.readByName,
        at: reading.readAt.toISOString(),
        reason: reading.reason,
      },
    ]
  })
  const ofDilutions = dilutionChanges.map(({ positionId, at, ...change }) => ({
    ...change,
    what: `Position ${numberOf.get(positionId) ?? ''}, dilution`,
    at: at.toISOString(),
  }))
  return [...ofReadings, ...ofDilutions].sort((a, b) => Date.parse(a.at) - Date.parse(b.at))
}
