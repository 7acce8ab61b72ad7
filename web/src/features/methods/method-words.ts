import { expectedConcentration } from '@weirlight/shared/assay'
import type { AcceptanceDefinition, MethodRecord } from '@weirlight/shared/contracts'

export interface FactRow {
  what: string
  value: string
  source: string
  edition: string
  mark: string
}
interface Sourced {
  source: string
  edition: string
  mark: string
}

const row = (what: string, value: string, of: Sourced): FactRow => ({
  what,
  value,
  source: of.source,
  edition: of.edition,
  mark: of.mark,
})

/** `11,000` */
const thousands = (value: number) => String(value).replace(/\B(?=(\d{3})+(?!\d))(?<!\.\d*)/g, ',')

export function constantRows(record: MethodRecord): FactRow[] {
  const { band, development, absorbanceLimits, range, pH } = record
  return [
    row(
      'Molar absorptivity',
      `${thousands(record.molarAbsorptivity.value)} L mol⁻¹ cm⁻¹`,
      record.molarAbsorptivity,
    ),
    row(
      'Slope this lets expect in a 1 cm cell',
      `${record.slopeInOneCm.value} A per mg/L`,
      record.slopeInOneCm,
    ),
    row(
      'A slope may lie from it by',
      `± ${record.slopeTolerancePercent.value} %`,
      record.slopeTolerancePercent,
    ),
    row(
      'Energy of the light absorbed',
      `${record.transitionEnergyKJPerMol.value} kJ/mol`,
      record.transitionEnergyKJPerMol,
    ),
    row(
      'Band, for the tint alone',
      `peak ${band.peakNm} nm, widths ${band.widthShortNm} and ${band.widthLongNm} nm`,
      band,
    ),
    row('Range of the method', `${range.low} to ${range.high} mg/L`, range),
    row('Reporting limit to begin with', `${record.reportingLimit.value} mg/L`, record.reportingLimit),
    row('Absorbances read well', `${absorbanceLimits.low} to ${absorbanceLimits.high}`, absorbanceLimits),
    row(
      'Reading window after the colour reagent',
      `${development.minMinutes} to ${development.maxMinutes} min`,
      development,
    ),
    ...(pH ? [row('pH while the colour forms', `${pH.low} to ${pH.high}`, pH)] : []),
    row(
      'A calibration is in force for at most',
      `${record.calibrationMaxAgeDays.value} days`,
      record.calibrationMaxAgeDays,
    ),
  ]
}

export function acceptanceRows(of: AcceptanceDefinition): FactRow[] {
  const within = (fact: { low: number; high: number }) => `${fact.low} to ${fact.high} %`
  return [
    row(
      'Standards above zero, straight line',
      `at least ${of.minimumStandardsLinear.value}`,
      of.minimumStandardsLinear,
    ),
    row(
      'Standards above zero, curve of second degree',
      `at least ${of.minimumStandardsQuadratic.value}`,
      of.minimumStandardsQuadratic,
    ),
    row('Correlation r, straight line', `at least ${of.minimumCorrelation.value}`, of.minimumCorrelation),
    row(
      'Correlation r, second degree',
      `at least ${of.minimumCorrelationQuadratic.value}`,
      of.minimumCorrelationQuadratic,
    ),
    row('Standards read back', `within ± ${of.readBackPercent.value} %`, of.readBackPercent),
    row(
      'Lowest standard read back',
      `within ± ${of.readBackPercentLowest.value} %`,
      of.readBackPercentLowest,
    ),
    row(
      'Relative standard error',
      `at most ${of.relativeStandardErrorPercent.value} %`,
      of.relativeStandardErrorPercent,
    ),
    row('Second source', within(of.secondSourcePercent), of.secondSourcePercent),
    row(
      'Verification during a run',
      `within ± ${of.continuingVerificationPercent.value} %`,
      of.continuingVerificationPercent,
    ),
    row(
      'Verification at least every',
      `${of.verificationEvery.value} samples, at the start and at the end`,
      of.verificationEvery,
    ),
    row(
      'Verification blank',
      `below ${of.calibrationBlankPart.value} of the reporting limit`,
      of.calibrationBlankPart,
    ),
    row('Method blank', of.methodBlank.text, of.methodBlank),
    row('Duplicates', `at most ${of.duplicatePercent.value} % apart`, of.duplicatePercent),
    row('Control sample', within(of.controlSamplePercent), of.controlSamplePercent),
    row('Spike recovery', within(of.spikeRecoveryPercent), of.spikeRecoveryPercent),
    row('Samples in a batch', `at most ${of.batchSize.value}`, of.batchSize),
  ]
}

const THRESHOLD_UNITS = {
  'mg/L': 'mg/L',
  'times-analyte': 'times the metal',
  'mg-in-sample': 'mg in the sample',
} as const

export function thresholdWords(threshold: MethodRecord['interferences'][number]['threshold']): string {
  if (threshold === null) return 'no amount named'
  return `${threshold.value} ${THRESHOLD_UNITS[threshold.unit]}`
}

/** Absorbances for the ladder of a method's page, with the concentration each stands for in a 1 cm cell. */
export function ladderSteps(
  record: Pick<MethodRecord, 'slopeInOneCm'>,
): { label: string; absorbance: number }[] {
  return [0.05, 0.1, 0.2, 0.4, 0.8, 1.5].map((absorbance) => ({
    label: expectedConcentration({ absorbance, slope: record.slopeInOneCm.value }).toPrecision(2),
    absorbance,
  }))
}

const APPROVALS = {
  approved: { word: 'approved', shape: 'disc', tone: 'meets' },
  'not-approved': { word: 'not approved', shape: 'triangle', tone: 'above' },
  ask: { word: 'ask the authority', shape: 'diamond', tone: 'caution' },
} as const
export const approvalMark = (status: MethodRecord['approvals'][number]['status']) => APPROVALS[status]
