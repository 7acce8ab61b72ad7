import { requireArray, requireFinite, requireObject, requirePositive } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { weightAt } from './calibration-weights.js'
import { curveVariance, slopeAt } from './curve-inversion.js'
import { describeSample } from './descriptive-statistics.js'
import { requireProbability, tUpperQuantile } from './distributions.js'
import { gate } from './finite-gate.js'
import type { CalibrationFit } from './fit-calibration.js'
import { requireFit, requireSlope } from './stored-fit.js'
import { ENGINE_VERSION } from './version.js'

export interface DetectionLimitOptions {
  /** probability of calling a blank a finding; 0.05 when left out */
  alpha?: number | undefined
  /** probability of missing the detection limit; alpha when left out */
  beta?: number | undefined
  /** readings of the unknown that are averaged; 1 when left out */
  readings?: number | undefined
  /** reciprocal of the relative uncertainty wanted at the quantification limit; 3 when left out */
  k?: number | undefined
}

export interface DetectionLimits {
  criticalValue: number
  detectionLimit: number
  quantificationLimit: number
  alpha: number
  beta: number
  readings: number
  k: number
  degreesOfFreedom: number
  engineVersion: string
  method: string
}

function readOptions(options: DetectionLimitOptions) {
  requireObject(options, 'options')
  const alpha = requireProbability(options.alpha ?? 0.05, 'alpha')
  const beta = requireProbability(options.beta ?? alpha, 'beta')
  const readings = options.readings ?? 1
  if (!Number.isInteger(readings) || readings < 1 || readings > 1e6) {
    throw new AssayError('invalid-argument', 'The number of readings must be a whole number from 1.')
  }
  const k = requirePositive(options.k ?? 3, 'factor k')
  return { alpha, beta, readings, k }
}

/**
 * Critical value, detection limit and quantification limit by the calibration method of DIN 32645 (1994, 2008).
 *
 * With u = sqrt(1/m + 1/n + xbar^2 / Sxx): critical value x_c = (s/b) t(1-alpha; f) u; detection limit
 * x_c + (s/b) t(1-beta; f) u; quantification limit the x that solves
 * x = k (s/b) t(1-alpha/2; f) sqrt(1/m + 1/n + (x-xbar)^2 / Sxx), solved exactly, not by the approximation.
 * In the unit of the concentrations.
 *
 * The field disagrees on names: the DIN critical value (Nachweisgrenze) is called detection limit by some; what is
 * called detection limit here is the DIN Erfassungsgrenze. The standard has one straight line of constant spread.
 * Beyond it: weighted fits take the weight of the lowest standard above zero for the reading, and a parabola is
 * replaced by its tangent at zero for the first two limits and by the delta method for the third; `method` says so.
 *
 * @throws AssayError slope-not-significant (also where no concentration is certain enough to quantify),
 *         invalid-probability, invalid-argument
 */
export function detectionLimits(fit: CalibrationFit, options: DetectionLimitOptions = {}): DetectionLimits {
  requireFit(fit)
  const { alpha, beta, readings, k } = readOptions(options)
  const { centred, degreesOfFreedom } = fit
  const atZero = -centred.centre
  if (fit.model !== 'quadratic') requireSlope(fit, 0)
  const slope = Math.abs(requireSlope(fit, atZero))
  const s = fit.residualStandardDeviation
  const readingVariance = (s / readings / weightAt(fit, 0)) * s
  const u = Math.sqrt(readingVariance + curveVariance(centred.covariance, atZero)) / slope
  const criticalValue = tUpperQuantile(alpha, degreesOfFreedom) * u
  const factor = k * tUpperQuantile(alpha / 2, degreesOfFreedom)
  const quantificationLimit =
    fit.model === 'quadratic'
      ? quantifyOnCurve({ fit, readingVariance, factor })
      : quantifyOnLine({ fit, readingVariance, factor })
  return gate({
    criticalValue,
    detectionLimit: criticalValue + tUpperQuantile(beta, degreesOfFreedom) * u,
    quantificationLimit,
    alpha,
    beta,
    readings,
    k,
    degreesOfFreedom,
    engineVersion: ENGINE_VERSION,
    method: `DIN 32645, calibration method${extension(fit)}`,
  })
}

function extension(fit: CalibrationFit): string {
  const parts: string[] = []
  if (fit.weighting !== 'none') parts.push('weighted fit, weight of the lowest standard')
  if (fit.model === 'linear-through-origin') parts.push('line through the origin')
  if (fit.model === 'quadratic') parts.push('parabola, tangent at zero and delta method')
  return parts.length === 0 ? '' : `, extended (${parts.join('; ')})`
}

function cannotQuantify(): AssayError {
  return new AssayError(
    'slope-not-significant',
    'The calibration is too uncertain to quantify at any concentration. Check the standards.',
  )
}

/** x^2 = f^2 var(x) / b^2 is a quadratic equation in x; its root is taken without cancellation. */
function quantifyOnLine(given: { fit: CalibrationFit; readingVariance: number; factor: number }): number {
  const { fit, readingVariance, factor } = given
  const { centre, coefficients, covariance } = fit.centred
  const slope = coefficients[1] ?? 0
  const [[c00 = 0, c01 = 0] = [], [, c11 = 0] = []] = covariance
  const scale = factor / slope
  const v11 = c11 * scale * scale
  const v01 = (c01 - centre * c11) * scale * scale
  const v00 = (readingVariance + c00 - 2 * centre * c01 + centre * centre * c11) * scale * scale
  // (1 - v11) x^2 - 2 v01 x - v00 = 0, v01 < 0 for a centroid above zero
  const discriminant = v01 * v01 + (1 - v11) * v00
  if (!(discriminant >= 0)) throw cannotQuantify()
  if (v00 === 0) return 0
  const root = Math.sqrt(discriminant)
  if (v01 <= 0) {
    if (!(root - v01 > 0)) throw cannotQuantify()
    return v00 / (root - v01)
  }
  if (!(1 - v11 > 0)) throw cannotQuantify()
  return (root + v01) / (1 - v11)
}

/** The lowest x above zero whose relative error is 1/k, by stepping up the curve and halving. */
function quantifyOnCurve(given: { fit: CalibrationFit; readingVariance: number; factor: number }): number {
  const { fit, readingVariance, factor } = given
  const { centred, range } = fit
  const sign = slopeAt(centred, -centred.centre) > 0 ? 1 : -1
  const isEnough = (x: number) => {
    const d = x - centred.centre
    const slope = sign * slopeAt(centred, d)
    return (
      slope > 0 && x * slope >= factor * Math.sqrt(readingVariance + curveVariance(centred.covariance, d))
    )
  }
  if (readingVariance === 0 && isEnough(0)) return 0
  const steps = 400
  let low = 0
  let high = 0
  for (let step = 1; step <= steps && high === 0; step += 1) {
    const x = (2 * range.high * step) / steps
    if (isEnough(x)) high = x
    else low = x
  }
  if (high === 0) throw cannotQuantify()
  for (let halving = 0; halving < 60; halving += 1) {
    const middle = low + (high - low) / 2
    if (isEnough(middle)) high = middle
    else low = middle
  }
  return high
}

export interface BlankLimitsInput extends DetectionLimitOptions {
  /** readings of independent blanks, in the unit of the response */
  blanks: readonly number[]
  /** response per unit of concentration */
  slope: number
}

export interface BlankDetectionLimits extends DetectionLimits {
  blankMean: number
  blankStandardDeviation: number
}

/**
 * Critical value, detection and quantification limit by the blank method of DIN 32645 (1994, 2008).
 *
 * x_c = (s_B / b) t(1-alpha; n-1) sqrt(1/m + 1/n); the detection limit adds the same term with beta; the
 * quantification limit is k (s_B / b) t(1-alpha/2; n-1) sqrt(1/m + 1/n). A falling response has a negative slope.
 *
 * @throws AssayError too-few-values (fewer than 2 blanks), invalid-argument (slope zero), invalid-probability
 */
export function detectionLimitsFromBlanks(input: BlankLimitsInput): BlankDetectionLimits {
  requireObject(input, 'blanks')
  const blanks = Array.from(requireArray(input.blanks, 'blanks'), (value, index) =>
    requireFinite(value, 'blank', index),
  )
  const slope = Math.abs(requireFinite(input.slope, 'slope'))
  if (slope === 0) throw new AssayError('invalid-argument', 'The slope cannot be zero.')
  const { alpha, beta, readings, k } = readOptions(input)
  if (blanks.length < 2) throw new AssayError('too-few-values', 'At least two blanks are needed.')
  const { mean, standardDeviation } = describeSample(blanks)
  const degreesOfFreedom = blanks.length - 1
  const u = (standardDeviation / slope) * Math.sqrt(1 / readings + 1 / blanks.length)
  const criticalValue = tUpperQuantile(alpha, degreesOfFreedom) * u
  return gate({
    criticalValue,
    detectionLimit: criticalValue + tUpperQuantile(beta, degreesOfFreedom) * u,
    quantificationLimit: k * tUpperQuantile(alpha / 2, degreesOfFreedom) * u,
    alpha,
    beta,
    readings,
    k,
    degreesOfFreedom,
    blankMean: mean,
    blankStandardDeviation: standardDeviation,
    engineVersion: ENGINE_VERSION,
    method: 'DIN 32645, blank method',
  })
}
