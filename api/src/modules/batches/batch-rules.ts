import { ENGINE_VERSION } from '@weirlight/shared/assay'
import type {
  AssessmentRules,
  CalibrationView,
  MethodRecord,
  ReportingRules,
} from '@weirlight/shared/contracts'
import type { WaitingToOpen } from './batch-rows.js'

/** Flasks and pipettes of class A that a standard passes through, as a relative standard uncertainty (common practice). */
const VOLUMETRIC_WORK = 0.005

interface Calibrated {
  stored: NonNullable<CalibrationView['stored']>
  cellPathCm: string
  model: CalibrationView['model']
  weighting: CalibrationView['weighting']
}

/** What the readings of a batch are judged by, frozen when it is opened. Pure. */
export function rulesOf(
  method: MethodRecord,
  { stored, cellPathCm, model, weighting }: Calibrated,
  stock: { concentration: string | null; uncertainty: string | null } | undefined,
): AssessmentRules {
  const { acceptance } = method
  // nothing is reported below what this very curve can detect
  const detectionLimit = stored.detectionLimit ?? method.reportingLimit.value
  const reportingLimit = Math.max(method.reportingLimit.value, detectionLimit)
  return {
    fit: stored.fit,
    engineVersion: ENGINE_VERSION,
    cellPathCm,
    calibrationModel: model,
    calibrationWeighting: weighting,
    detectionLimit,
    quantificationLimit: stored.quantificationLimit ?? reportingLimit,
    reportingLimit,
    uncertaintyComponents: [
      { name: 'volumetric work', value: VOLUMETRIC_WORK, kind: 'relative' },
      ...ofStock(stock),
    ],
    readableAbsorbance: { low: method.absorbanceLimits.low, high: method.absorbanceLimits.high },
    verificationTolerancePercent: acceptance.continuingVerificationPercent.value,
    controlLowPercent: acceptance.controlSamplePercent.low,
    controlHighPercent: acceptance.controlSamplePercent.high,
    duplicateTolerancePercent: acceptance.duplicatePercent.value,
    spikeLowPercent: acceptance.spikeRecoveryPercent.low,
    spikeHighPercent: acceptance.spikeRecoveryPercent.high,
    blankLimit: acceptance.methodBlank.reportingLimitPart * reportingLimit,
    blankSamplePart: acceptance.methodBlank.samplePart,
    verificationBlankLimit: acceptance.calibrationBlankPart.value * reportingLimit,
  }
}

/** A certificate states the expanded uncertainty with k = 2 (common practice). */
function ofStock(
  stock: { concentration: string | null; uncertainty: string | null } | undefined,
): AssessmentRules['uncertaintyComponents'] {
  const concentration = Number(stock?.concentration ?? 0)
  const uncertainty = Number(stock?.uncertainty ?? 0)
  if (concentration <= 0 || uncertainty <= 0) return []
  return [{ name: 'stock standard', value: uncertainty / 2 / concentration, kind: 'relative' }]
}

/** Of positions that no client sees: the number as measured. */
export const CONTROL_REPORTING: ReportingRules = {
  displayUnit: 'mg/L',
  ties: 'half-even',
  nonDetect: 'as-measured',
  digits: 4,
}

const DIGITS_WITHOUT_RULE = 3

/** How the client's programme shows a sample: at least as many digits as its limits have. */
export function reportingOf(sample: WaitingToOpen, analyte: string): ReportingRules {
  const { displayUnit, ties, nonDetect, nonDetectFor, reportedDigits, limits } = sample
  return {
    displayUnit,
    ties,
    nonDetect: nonDetectFor?.find((one) => one.analyte === analyte)?.rule ?? nonDetect,
    digits: Math.max(reportedDigits ?? DIGITS_WITHOUT_RULE, ...limits.map(({ digits }) => digits)),
  }
}

/** The duplicate and the spike are read beside their sample, in its unit. */
export function besideSample(reporting: ReportingRules): ReportingRules {
  return { ...reporting, nonDetect: 'as-measured' }
}
