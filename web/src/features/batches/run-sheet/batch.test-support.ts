import { fitCalibration } from '@weirlight/shared/assay'
import type { BatchView, PositionView } from '@weirlight/shared/contracts'
import { assessPosition, assessRun, findInBatch } from '@weirlight/shared/worksheet'

const AT = '2026-12-01T10:15:00-05:00'
export const INES = { id: '11', name: 'Ines Okafor' }

const NOT_READ: PositionView['assessment'] = assessPosition(
  {
    kind: 'blank',
    absorbances: [],
    dilution: 1,
    expected: null,
    added: null,
    parent: null,
    limits: [],
    reporting: { displayUnit: 'mg/L', ties: 'half-up', nonDetect: 'less-than-loq', digits: 2 },
  },
  {} as BatchView['rules'],
)

export function aReading(
  replicate: number,
  absorbance: string,
  part: Partial<PositionView['readings'][number]> = {},
) {
  return {
    id: `${replicate}00`,
    replicate,
    absorbance,
    readAt: AT,
    readBy: INES,
    source: 'typed',
    corrected: false,
    ...part,
  }
}

export function aPosition(part: Partial<PositionView> = {}): PositionView {
  return {
    id: '205',
    position: 5,
    kind: 'sample',
    label: 'S-26-04117',
    determinationId: '305',
    sampleId: '405',
    sampleNumber: 'S-26-04117',
    pointName: 'Quillon Rd reservoir outlet',
    clientName: 'Pellam Hills Water',
    ofPositionId: null,
    ofPosition: null,
    expected: null,
    added: null,
    lotId: null,
    lotNumber: null,
    dilution: '1',
    note: '',
    holding: null,
    colourStartedAt: null,
    readings: [],
    limits: [
      {
        id: '9',
        name: 'secondary limit',
        kind: 'secondary',
        value: '0.3',
        unit: 'mg/L',
        digits: 1,
        rule: 'rounded',
        source: 'constructed',
      },
    ],
    reporting: { displayUnit: 'mg/L', ties: 'half-up', nonDetect: 'less-than-loq', digits: 2 },
    assessment: NOT_READ,
    resultId: null,
    version: 1,
    ...part,
  }
}

/** A line of slope 0.2 per mg/L up to 4 mg/L, with a little scatter (constructed). */
const fit = fitCalibration({
  points: [0, 0.1, 0.5, 1, 2, 4].map((concentration, index) => ({
    concentration,
    absorbance: 0.2 * concentration + (index % 2 ? 0.0005 : -0.0005),
  })),
  model: 'linear',
})

export function aBatch(rows: PositionView[], part: Partial<BatchView> = {}): BatchView {
  return {
    id: '311',
    number: 'B-26-0311',
    methodId: '1',
    methodTitle: 'Iron by 1,10-phenanthroline',
    analyte: 'Fe',
    form: 'total',
    calibrationId: '87',
    calibrationNumber: 'K-26-0087',
    state: 'open',
    openedBy: INES,
    openedAt: AT,
    submittedAt: null,
    releasedAt: null,
    positions: rows.length,
    read: 0,
    samples: 1,
    aboveLimit: 0,
    findings: 0,
    reviewDueAt: null,
    version: 1,
    instrumentId: '5',
    instrumentName: 'Spectrophotometer 2',
    wavelengthNm: 510,
    replicates: 2,
    calibrationValidUntil: null,
    cellPathCm: '1',
    colourWindow: { fromMinutes: 10, toMinutes: 60 },
    band: { peakNm: 510, widthShortNm: 60, widthLongNm: 25 },
    cautions: [],
    reagentLots: [],
    rows,
    rules: {
      fit: fit as unknown as Record<string, unknown>,
      engineVersion: '1.0.0',
      cellPathCm: '1',
      calibrationModel: 'linear',
      calibrationWeighting: 'none',
      detectionLimit: 0.02,
      quantificationLimit: 0.06,
      reportingLimit: 0.05,
      uncertaintyComponents: [{ name: 'standards', value: 0.01, kind: 'relative' }],
      readableAbsorbance: { low: 0.05, high: 1.5 },
      verificationTolerancePercent: 10,
      controlLowPercent: 90,
      controlHighPercent: 110,
      duplicateTolerancePercent: 20,
      spikeLowPercent: 80,
      spikeHighPercent: 120,
      blankLimit: 0.025,
    },
    findingsList: [],
    corrections: [],
    signatures: [],
    returnedReason: '',
    note: '',
    colourStartedAt: null,
    alsoHere: [],
    ...part,
  }
}

/** As the server would answer it: every position assessed, every finding found. */
export function assessed(batch: BatchView): BatchView {
  const assessments = assessRun(
    batch.rows.map((row) => ({
      id: row.id,
      ofPositionId: row.ofPositionId,
      kind: row.kind,
      absorbances: row.readings.map((reading) => Number(reading.absorbance)),
      dilution: Number(row.dilution),
      expected: row.expected === null ? null : Number(row.expected),
      added: row.added === null ? null : Number(row.added),
      limits: row.limits,
      reporting: row.reporting,
    })),
    batch.rules,
  )
  const rows = batch.rows.map((row) => ({ ...row, assessment: assessments.get(row.id) ?? NOT_READ }))
  const { findings } = findInBatch({
    positions: rows.map((row) => ({
      id: row.id,
      position: row.position,
      kind: row.kind,
      label: row.label,
      readings: row.readings.map((reading) => ({
        absorbance: Number(reading.absorbance),
        readAt: reading.readAt,
      })),
      assessment: row.assessment,
      holdingDueAt: row.holding?.dueAt ?? null,
    })),
    rules: batch.rules,
    colour: null,
  })
  return { ...batch, rows, findingsList: findings.map((finding) => ({ ...finding, action: null })) }
}
