import { sampleCorrelation } from 'simple-statistics'
import { requireArray, requireFinite, requireObject, requireOneOf } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { lowestAboveZero, modelWeight, WEIGHTINGS, type Weighting } from './calibration-weights.js'
import { requireConcentration, requireSpread, requireWeight } from './curve-points.js'
import { invertCurve } from './curve-inversion.js'
import { largestOf } from './descriptive-statistics.js'
import { exactSum, powerOfTwoOf } from './double-double.js'
import { gate } from './finite-gate.js'
import { describeFit, type PolynomialFit } from './fit-polynomial.js'
import { solveLeastSquares } from './least-squares.js'

export const CALIBRATION_MODELS = ['linear', 'linear-through-origin', 'quadratic'] as const
export type CalibrationModel = (typeof CALIBRATION_MODELS)[number]

export interface CalibrationPoint {
  concentration: number
  absorbance: number
  weight?: number | undefined
}

export interface FitCalibrationInput {
  /** one entry a reading; replicates repeat the concentration */
  points: readonly CalibrationPoint[]
  model: CalibrationModel
  /** 'none' when left out; weights on the points count only with 'given' */
  weighting?: Weighting | undefined
}

export interface ReadBack {
  concentration: number
  absorbance: number
  /** scaled, so that the weights of a fit sum to n */
  weight: number
  fitted: number
  residual: number
  /** residual over its own standard deviation, s sqrt((1 - h) / w); 0 where the point alone determines its fit */
  standardizedResidual: number
  leverage: number
  /** concentration the curve gives for this absorbance; null where the curve gives none */
  backCalculated: number | null
  /** null at zero concentration */
  relativeErrorPercent: number | null
}

export interface CalibrationFit extends PolynomialFit {
  model: CalibrationModel
  weighting: Weighting
  /** scaled weight = weightScale times the weight by the model or as given */
  weightScale: number
  /** Pearson's, weighted as the fit; 0 where the readings do not vary */
  correlation: number
  range: { low: number; high: number }
  readBack: ReadBack[]
  /** null where no standard above zero is left over after the parameters */
  relativeStandardErrorPercent: number | null
}

/**
 * Calibration curve: absorbance as a function of concentration.
 *
 * Line, line through the origin, or parabola, by (weighted) least squares as in `fitPolynomial`. The weight of a
 * standard is 1, 1/c, 1/c^2 or as given; a zero standard takes the weight of the lowest standard above zero;
 * weights are scaled to sum to n, so that the residual standard deviation is that of a reading of average weight.
 * Every standard is read back through its own curve. The relative standard error is
 * 100 sqrt(sum(((read back - true) / true)^2) / (m - p)), m the readings above zero, p the parameters.
 *
 * Sources: ISO 8466-1:1990 and -2:2001 (line, parabola); DIN 38402-51; Miller and Miller, Statistics and
 * Chemometrics for Analytical Chemistry, ch. 5 (weights scaled to n); EPA SW-846 8000D section 11.5.4 (RSE).
 *
 * @throws AssayError too-few-points (a line needs three readings at two levels, a parabola four at three),
 *         all-concentrations-equal, negative-concentration, non-finite, invalid-weight, invalid-argument, no-spread
 */
export function fitCalibration(input: FitCalibrationInput): CalibrationFit {
  requireObject(input, 'calibration')
  const model = requireOneOf(input.model, CALIBRATION_MODELS, 'model')
  const weighting = requireOneOf(input.weighting ?? 'none', WEIGHTINGS, 'weighting')
  const points = Array.from(requireArray(input.points, 'points'))
  const x: number[] = []
  const y: number[] = []
  points.forEach((point, index) => {
    requireObject(point, 'point')
    x.push(requireConcentration(point.concentration, index))
    y.push(requireFinite(point.absorbance, 'absorbance', index) + 0)
  })
  const degree = model === 'quadratic' ? 2 : 1
  const throughOrigin = model === 'linear-through-origin'
  requireSpread({ x, degree, throughOrigin })

  const { weights, weightScale } = scaleWeights({ points, x, weighting })
  const isWeighted = weighting !== 'none'
  const solution = solveLeastSquares({
    x,
    y,
    degree,
    throughOrigin,
    weights: isWeighted ? weights : undefined,
  })
  const polynomial = describeFit({ solution, degree, throughOrigin, n: x.length, isWeighted })
  const range = { low: Math.min(...x), high: Math.max(...x) }
  const s = polynomial.residualStandardDeviation

  const readBack = x.map((concentration, i): ReadBack => {
    const absorbance = y[i] ?? 0
    const residual = polynomial.residuals[i] ?? 0
    const leverage = solution.leverages[i] ?? 0
    const weight = weights[i] ?? 1
    const spread = s * Math.sqrt((1 - leverage) / weight)
    const inversion = invertCurve(polynomial.centred, absorbance, range)
    const isStandard = inversion.found && Number.isFinite(inversion.offset)
    const backCalculated = isStandard ? polynomial.centred.centre + inversion.offset : null
    const hasError = backCalculated !== null && concentration > 0
    return {
      concentration,
      absorbance,
      weight,
      fitted: absorbance - residual,
      residual,
      standardizedResidual: spread > 0 && leverage < 1 - 1e-12 ? residual / spread : 0,
      leverage,
      backCalculated,
      relativeErrorPercent: hasError
        ? finiteOrNull((100 * (backCalculated - concentration)) / concentration)
        : null,
    }
  })
  return gate({
    ...polynomial,
    model,
    weighting,
    weightScale,
    correlation: correlationOf({ x, y, weights, isWeighted }),
    range,
    readBack,
    relativeStandardErrorPercent: relativeStandardError(readBack, polynomial.n - polynomial.degreesOfFreedom),
    method: `${polynomial.method}${isWeighted ? `, weights ${WEIGHT_NAMES[weighting]} scaled to sum to n` : ''}`,
  })
}

const WEIGHT_NAMES: Record<Weighting, string> = {
  none: '1',
  'inverse-concentration': '1/c',
  'inverse-concentration-squared': '1/c^2',
  given: 'as given',
}

function finiteOrNull(value: number): number | null {
  return Number.isFinite(value) ? value : null
}

function scaleWeights(given: {
  points: readonly CalibrationPoint[]
  x: readonly number[]
  weighting: Weighting
}): { weights: number[]; weightScale: number } {
  const { points, x, weighting } = given
  const lowest = lowestAboveZero(x.map((concentration) => ({ concentration })))
  const raw = x.map((concentration, index) => {
    const weight =
      weighting === 'given' ? points[index]?.weight : modelWeight(weighting, concentration, lowest)
    return requireWeight(weight, index)
  })
  const weightScale = raw.length / exactSum(raw)
  const weights = raw.map((weight) => weight * weightScale)
  const lost = weights.findIndex((weight) => !(weight > 0 && Number.isFinite(weight)))
  if (lost >= 0 || !Number.isFinite(weightScale)) {
    throw new AssayError(
      'invalid-weight',
      'The weights are too far apart to compute with.',
      Math.max(0, lost),
    )
  }
  return { weights, weightScale }
}

function correlationOf(given: {
  x: readonly number[]
  y: readonly number[]
  weights: readonly number[]
  isWeighted: boolean
}): number {
  const { weights } = given
  const scaleX = powerOfTwoOf(largestOf(given.x))
  const scaleY = powerOfTwoOf(largestOf(given.y))
  const x = given.x.map((value) => value / scaleX)
  const y = given.y.map((value) => value / scaleY)
  const value = given.isWeighted ? weightedCorrelation({ x, y, weights }) : sampleCorrelation(x, y)
  // readings that do not vary leave 0 / 0
  return Number.isFinite(value) ? Math.min(1, Math.max(-1, value)) : 0
}

function weightedCorrelation(given: { x: number[]; y: number[]; weights: readonly number[] }): number {
  const { weights } = given
  const u = centre(given.x, weights)
  const v = centre(given.y, weights)
  let uu = 0
  let vv = 0
  let uv = 0
  u.forEach((value, i) => {
    const weight = weights[i] ?? 1
    const other = v[i] ?? 0
    uu += weight * value * value
    vv += weight * other * other
    uv += weight * value * other
  })
  return uv / Math.sqrt(uu) / Math.sqrt(vv)
}

function centre(values: readonly number[], weights: readonly number[]): number[] {
  const mean = exactSum(values.map((value, i) => value * (weights[i] ?? 1))) / exactSum(weights)
  return values.map((value) => value - mean)
}

function relativeStandardError(readBack: readonly ReadBack[], parameters: number): number | null {
  const above = readBack.filter((row) => row.concentration > 0)
  const left = above.length - parameters
  if (left < 1) return null
  let sum = 0
  for (const { relativeErrorPercent } of above) {
    if (relativeErrorPercent === null) return null
    sum += relativeErrorPercent * relativeErrorPercent
  }
  return finiteOrNull(Math.sqrt(sum / left))
}
