import type { CalibrationView, calibrationRow, correctionView } from '@weirlight/shared/contracts'
import { assessCalibration, type CalibrationAssessment } from '@weirlight/shared/worksheet'
import type { z } from 'zod'
import type { CalibrationListRow, CalibrationWholeRow, ReadingRow, StandardRow } from './calibration-rows.js'
import type { SavedStandard } from './standards-change.js'

type Correction = z.infer<typeof correctionView>

export interface CalibrationWhole {
  row: CalibrationWholeRow
  /** with those taken out, which come last */
  standards: readonly StandardRow[]
  /** every reading ever taken, oldest first */
  readings: readonly ReadingRow[]
}

interface Counting {
  standard: StandardRow
  /** the reading that counts in each cell, withdrawn ones too, by replicate */
  cells: readonly ReadingRow[]
}

/** The standards of the calibration as they stand, each with the readings that count. */
export function countingStandards({ standards, readings }: CalibrationWhole): Counting[] {
  const superseded = new Set(
    readings.flatMap(({ supersedesId }) => (supersedesId === null ? [] : [supersedesId])),
  )
  return standards
    .filter(({ removed }) => !removed)
    .map((standard) => ({
      standard,
      cells: readings
        .filter(({ id, standardId }) => standardId === standard.id && !superseded.has(id))
        .sort((a, b) => a.replicate - b.replicate),
    }))
}

export function savedStandards(whole: CalibrationWhole): SavedStandard[] {
  return countingStandards(whole).map(({ standard, cells }) => ({
    ...standard,
    cells: new Map(
      cells.map(({ id, replicate, absorbanceText }) => [replicate, { id, text: absorbanceText }]),
    ),
  }))
}

/** By the engine, from the readings that count: what the page previews and what is stored at submission. */
export function assessWhole(whole: CalibrationWhole): CalibrationAssessment {
  const { row } = whole
  return assessCalibration({
    standards: countingStandards(whole).map(({ standard, cells }) => ({
      role: standard.role,
      concentration: Number(standard.concentration),
      absorbances: cells.flatMap(({ absorbanceText }) =>
        absorbanceText === null ? [] : [Number(absorbanceText)],
      ),
      leftOut: standard.leftOutReason !== '',
    })),
    model: row.model,
    weighting: row.weighting,
    cellPathCm: Number(row.cellPathCm),
    molarMass: row.definition.molarMass,
    method: row.definition,
  })
}

export function toListRow(row: CalibrationListRow): z.input<typeof calibrationRow> {
  const { preparedBy, preparedByName, submittedAt, validUntil, ...plain } = row
  return {
    ...plain,
    preparedBy: { id: preparedBy, name: preparedByName },
    submittedAt: submittedAt?.toISOString() ?? null,
    validUntil: validUntil?.toISOString() ?? null,
  }
}

export function toView(whole: CalibrationWhole, signatures: CalibrationView['signatures']): CalibrationView {
  const { row } = whole
  const isDraft = row.state === 'draft'
  const live = isDraft ? assessWhole(whole) : undefined
  const { stored, criteria } = live ?? row
  const {
    draftId: _d,
    methodCode: _c,
    methodEdition: _e,
    definition,
    replacedById,
    replacedByNumber,
    signedAt,
    endedAt: _x,
    colourStartedAt,
    createdAt,
    ...plain
  } = row
  return {
    ...plain,
    ...toListRow(row),
    slope: stored?.slope ?? null,
    correlation: stored?.correlation ?? null,
    criteriaFailed: criteria.filter(({ outcome }) => outcome === 'fail').length,
    wavelengthNm: definition.wavelengthNm,
    colourStartedAt: colourStartedAt?.toISOString() ?? null,
    createdAt: createdAt.toISOString(),
    standards: countingStandards(whole).map(({ standard, cells }) => {
      const { removed: _r, ...shown } = standard
      return { ...shown, readings: cells.flatMap(toReading) }
    }),
    stored,
    criteria,
    signatures,
    corrections: listCorrections(whole),
    validFrom: signedAt?.toISOString() ?? null,
    replacedBy: replacedById === null ? null : { id: replacedById, number: replacedByNumber ?? '' },
  }
}

function toReading(reading: ReadingRow) {
  if (reading.absorbanceText === null) return []
  return [
    {
      id: reading.id,
      replicate: reading.replicate,
      absorbance: reading.absorbanceText,
      readAt: reading.readAt.toISOString(),
      readBy: { id: reading.readBy, name: reading.readByName },
      corrected: reading.supersedesId !== null,
    },
  ]
}

/** What was written over, oldest first, also in standards that were taken out since. */
export function listCorrections({ standards, readings }: CalibrationWhole): Correction[] {
  const byId = new Map(readings.map((reading) => [reading.id, reading]))
  const standardOf = new Map(standards.map((standard) => [standard.id, standard]))
  return readings.flatMap((reading) => {
    const before = reading.supersedesId === null ? undefined : byId.get(reading.supersedesId)
    if (!before) return []
    const standard = standardOf.get(reading.standardId)
    const name = standard ? `${nameOf(standard)}${standard.removed ? ' (taken out)' : ''}` : 'Standard'
    return [
      {
        what: `${name}, reading ${reading.replicate}`,
        from: before.absorbanceText ?? 'empty',
        to: reading.absorbanceText ?? 'empty',
        by: reading.readByName,
        at: reading.readAt.toISOString(),
        reason: reading.reason,
      },
    ]
  })
}

export function nameOf(standard: Pick<StandardRow, 'position' | 'role' | 'concentration'>): string {
  return standard.role === 'second-source'
    ? `Second source ${standard.concentration} mg/L`
    : `Standard ${standard.position}, ${standard.concentration} mg/L`
}

/**
 * Exactly what the signer has on the screen, in one fixed shape: its hash is signed, and made again from the record to
 * see whether the signature still stands. What happens later to a calibration (expired, replaced) is not in it.
 */
export function signedContent(whole: CalibrationWhole, justification: string): unknown {
  const { row, readings } = whole
  return {
    number: row.number,
    method: { code: row.methodCode, edition: row.methodEdition },
    instrumentId: row.instrumentId,
    cellPathCm: row.cellPathCm,
    model: row.model,
    weighting: row.weighting,
    stockLot: row.stockLotNumber,
    reagentLots: row.reagentLots.map(({ number }) => number),
    colourStartedAt: row.colourStartedAt?.toISOString() ?? null,
    temperatureC: row.temperatureC,
    note: row.note,
    standards: whole.standards.map((standard) => ({
      position: standard.position,
      role: standard.role,
      concentration: standard.concentration,
      lot: standard.lotNumber,
      leftOutReason: standard.leftOutReason,
      removed: standard.removed,
      readings: readings
        .filter(({ standardId }) => standardId === standard.id)
        .map(({ id, replicate, absorbanceText, supersedesId, reason, readBy, readAt }) => ({
          ...{ id, replicate, absorbance: absorbanceText, supersedesId, reason, readBy },
          readAt: readAt.toISOString(),
        })),
    })),
    stored: row.stored,
    criteria: row.criteria,
    preparedBy: row.preparedBy,
    submittedAt: row.submittedAt?.toISOString() ?? null,
    justification,
  }
}
