import {
  AssayError,
  describeSample,
  detectionLimits,
  diagnoseSlope,
  ENGINE_VERSION,
  fitCalibration,
  lackOfFitTest,
  mandelTest,
  molarAbsorptivity,
  predictConcentration,
  recoveryPercent,
  roundReported,
  type CalibrationFit,
  type CalibrationModel,
} from '../assay/index.js'
import type { Criterion, MethodDefinition, storedFit } from '../contracts/index.js'
import type { z } from 'zod'

export type StoredFit = z.infer<typeof storedFit>

export interface CalibrationToAssess {
  standards: readonly {
    role: 'standard' | 'second-source'
    /** mg/L */
    concentration: number
    absorbances: readonly number[]
    leftOut: boolean
  }[]
  model: CalibrationModel
  weighting: 'none' | 'inverse-concentration' | 'inverse-concentration-squared'
  cellPathCm: number
  /** g/mol */
  molarMass: number
  method: Pick<
    MethodDefinition,
    'acceptance' | 'absorbanceLimits' | 'slopeTolerancePercent' | 'reportingLimit' | 'molarAbsorptivity'
  >
}

export interface CalibrationAssessment {
  fit: CalibrationFit | null
  stored: StoredFit | null
  criteria: Criterion[]
  diagnosis: { verdict: 'as-expected' | 'low' | 'high'; ratio: number; explanation: string } | null
  /** why no curve can be computed yet, for a technician */
  refusal: string | null
}

const digits = (value: number, kept: number) =>
  roundReported(value, { to: 'significant', digits: kept, ties: 'half-even' })

/**
 * A calibration judged by its method: the fit, molar absorptivity, limits of detection and quantification (DIN 32645), and
 * every acceptance criterion with what was found. Composes functions of the engine; the page previews with it and
 * the server stores what it gives. Throws nothing: what the engine refuses becomes `refusal`.
 */
export function assessCalibration(input: CalibrationToAssess): CalibrationAssessment {
  const used = input.standards.filter((standard) => standard.role === 'standard' && !standard.leftOut)
  const points = used.flatMap((standard) =>
    standard.absorbances.map((absorbance) => ({ concentration: standard.concentration, absorbance })),
  )
  let fit: CalibrationFit
  try {
    fit = fitCalibration({ points, model: input.model, weighting: input.weighting })
  } catch (error) {
    if (!(error instanceof AssayError)) throw error
    return { fit: null, stored: null, criteria: [], diagnosis: null, refusal: error.message }
  }
  const slope = fit.coefficients[1] ?? 0
  const expected = {
    molarAbsorptivity: input.method.molarAbsorptivity.value,
    molarMass: input.molarMass,
    pathLengthCm: input.cellPathCm,
  }
  const limits = attempt(() => detectionLimits(fit, {}))
  const epsilon = attempt(() =>
    molarAbsorptivity({ slope, molarMass: input.molarMass, pathLengthCm: input.cellPathCm }),
  )
  const diagnosis = attempt(() =>
    diagnoseSlope({ slope, expected, tolerancePercent: input.method.slopeTolerancePercent.value }),
  )
  const stored: StoredFit = {
    engineVersion: ENGINE_VERSION,
    fit: fit as unknown as Record<string, unknown>,
    slope,
    slopeError: fit.standardErrors[1] ?? 0,
    intercept: fit.coefficients[0] ?? 0,
    interceptError: fit.standardErrors[0] ?? 0,
    correlation: fit.correlation,
    rSquared: fit.rSquared,
    residualStandardDeviation: fit.residualStandardDeviation,
    molarAbsorptivity: epsilon,
    detectionLimit: limits?.detectionLimit ?? null,
    quantificationLimit: limits?.quantificationLimit ?? null,
  }
  return { fit, stored, criteria: judge({ input, fit, points, diagnosis }), diagnosis, refusal: null }
}

function attempt<T>(compute: () => T): T | null {
  try {
    return compute()
  } catch (error) {
    if (error instanceof AssayError) return null
    throw error
  }
}

function judge(given: {
  input: CalibrationToAssess
  fit: CalibrationFit
  points: { concentration: number; absorbance: number }[]
  diagnosis: CalibrationAssessment['diagnosis']
}): Criterion[] {
  const { input, fit, points } = given
  const { acceptance } = input.method
  const isCurve = input.model === 'quadratic'
  const levels = new Set(
    points.filter((point) => point.concentration > 0).map((point) => point.concentration),
  )
  const needed = (isCurve ? acceptance.minimumStandardsQuadratic : acceptance.minimumStandardsLinear).value
  const correlation = (isCurve ? acceptance.minimumCorrelationQuadratic : acceptance.minimumCorrelation).value
  const lowest = Math.min(...levels)
  const pass = (ok: boolean) => (ok ? 'pass' : 'fail') as 'pass' | 'fail'
  return [
    {
      code: 'standards',
      what: `At least ${needed} standards above zero`,
      found: String(levels.size),
      limit: String(needed),
      outcome: pass(levels.size >= needed),
    },
    {
      code: 'correlation',
      what: `r at least ${correlation}`,
      found: fit.correlation.toFixed(5),
      limit: String(correlation),
      outcome: pass(Math.abs(fit.correlation) >= correlation),
    },
    readBack({
      fit,
      lowest,
      all: acceptance.readBackPercent.value,
      atLowest: acceptance.readBackPercentLowest.value,
    }),
    {
      code: 'lowest-standard',
      what: `Lowest standard at or below the reporting limit, ${input.method.reportingLimit.value} mg/L`,
      found: Number.isFinite(lowest) ? `${lowest} mg/L` : '',
      limit: `${input.method.reportingLimit.value} mg/L`,
      outcome: lowest <= input.method.reportingLimit.value ? 'pass' : 'warn',
    },
    linearity(points, input.model),
    lackOfFit(points, isCurve ? 2 : 1),
    secondSource(input, fit),
    {
      code: 'slope',
      what: 'Slope as the complex lets expect',
      found: given.diagnosis ? `${digits(given.diagnosis.ratio * 100, 4)} % of expected` : '',
      limit: `± ${input.method.slopeTolerancePercent.value} %`,
      outcome: given.diagnosis ? (given.diagnosis.verdict === 'as-expected' ? 'pass' : 'warn') : 'not-judged',
    },
    readable(points, input.method.absorbanceLimits.high),
  ]
}

/** The mean of the replicates of each standard, read back: single readings scatter more than the criterion means. */
function readBack(given: { fit: CalibrationFit; lowest: number; all: number; atLowest: number }): Criterion {
  const { fit, lowest, all, atLowest } = given
  const byLevel = groupByConcentration(fit.readBack)
  let worst = 0
  let ok = true
  for (const [concentration, rows] of byLevel) {
    const errors = rows.map((row) => row.relativeErrorPercent).filter((error) => error !== null)
    if (concentration === 0 || errors.length < rows.length) continue
    const { mean } = describeSample(errors)
    if (Math.abs(mean) > Math.abs(worst)) worst = mean
    if (Math.abs(mean) > (concentration === lowest ? atLowest : all)) ok = false
  }
  return {
    code: 'read-back',
    what: `Standards read back within ${all} %, the lowest within ${atLowest} %`,
    found: `${worst > 0 ? '+' : ''}${roundReported(worst, { to: 'decimals', digits: 1, ties: 'half-even' })} %`,
    limit: `${all} % / ${atLowest} %`,
    outcome: ok ? 'pass' : 'fail',
  }
}

function groupByConcentration(rows: CalibrationFit['readBack']) {
  const groups = new Map<number, CalibrationFit['readBack']>()
  for (const row of rows) groups.set(row.concentration, [...(groups.get(row.concentration) ?? []), row])
  return groups
}

function linearity(
  points: { concentration: number; absorbance: number }[],
  model: CalibrationModel,
): Criterion {
  const base = { code: 'linearity', what: 'Linear by Mandel’s test, 99 %', limit: '99 %' }
  const test = attempt(() => mandelTest(points))
  if (!test || model === 'quadratic')
    return {
      ...base,
      found: test ? `F ${digits(test.testValue, 3)}` : 'too few levels',
      outcome: 'not-judged',
    }
  return {
    ...base,
    found: `F ${digits(test.testValue, 3)}`,
    limit: `F ${digits(test.criticalValue99, 3)}`,
    outcome: test.verdict99 === 'linear' ? 'pass' : 'fail',
  }
}

function lackOfFit(points: { concentration: number; absorbance: number }[], degree: number): Criterion {
  const base = { code: 'lack-of-fit', what: 'Lack of fit, 95 %', limit: 'p 0.05' }
  const test = attempt(() => lackOfFitTest(points, degree))
  if (!test) return { ...base, found: 'no replicates', outcome: 'not-judged' }
  // with very repeatable readings this test finds bends too small to matter; it warns, the read-back decides
  return {
    ...base,
    found: `p ${digits(test.probability, 2)}`,
    outcome: test.probability >= 0.05 ? 'pass' : 'warn',
  }
}

function secondSource(input: CalibrationToAssess, fit: CalibrationFit): Criterion {
  const { low, high } = input.method.acceptance.secondSourcePercent
  const base = {
    code: 'second-source',
    what: `Second source within ${low} to ${high} %`,
    limit: `${low} to ${high} %`,
  }
  const checks = input.standards.filter(
    (s) => s.role === 'second-source' && s.absorbances.length > 0 && s.concentration > 0,
  )
  if (checks.length === 0) return { ...base, found: 'not read', outcome: 'fail' }
  const recoveries = checks.map((check) =>
    attempt(() =>
      recoveryPercent({
        found: predictConcentration(fit, { absorbances: [...check.absorbances] }).concentration,
        expected: check.concentration,
      }),
    ),
  )
  const found = recoveries.map((value) =>
    value === null ? '–' : `${roundReported(value, { to: 'decimals', digits: 1, ties: 'half-even' })} %`,
  )
  const ok = recoveries.every((value) => value !== null && value >= low && value <= high)
  return { ...base, found: found.join(', '), outcome: ok ? 'pass' : 'fail' }
}

function readable(points: { absorbance: number }[], high: number): Criterion {
  const highest = Math.max(...points.map((point) => point.absorbance))
  return {
    code: 'readable',
    what: `Highest absorbance at most ${high}`,
    found: digits(highest, 4),
    limit: String(high),
    outcome: highest <= high ? 'pass' : 'warn',
  }
}
