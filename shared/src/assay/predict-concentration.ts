import { requireArray, requireFinite, requireObject } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { weightAt } from './calibration-weights.js'
import { curveVariance, invertCurve } from './curve-inversion.js'
import { requireWeight } from './curve-points.js'
import { requireProbability, tTwoSidedQuantile } from './distributions.js'
import { exactSum } from './double-double.js'
import { gate } from './finite-gate.js'
import type { CalibrationFit } from './fit-calibration.js'
import { requireFit, requireSlope } from './stored-fit.js'
import { ENGINE_VERSION } from './version.js'

export interface PredictConcentrationInput {
  /** the readings of the unknown; their mean is read off the curve */
  absorbances: readonly number[]
  /** 0.95 when left out */
  confidence?: number | undefined
  /** weight of one reading of the unknown, on the scale of the weights before they were scaled to sum to n */
  responseWeight?: number | undefined
}

export interface ConcentrationPrediction {
  /** may be negative; reporting decides what to do with it */
  concentration: number
  standardError: number
  degreesOfFreedom: number
  confidence: number
  interval: { low: number; high: number }
  /** exact inversion; null for a parabola and where the slope is not significant at this confidence */
  fieller: { low: number; high: number } | null
  outsideRange: 'below' | 'above' | null
  absorbance: number
  readings: number
  /** scaled weight used for a reading of the unknown */
  responseWeight: number
  slopeAtConcentration: number
  engineVersion: string
  method: string
}

/**
 * Concentration of an unknown from its readings, with standard error and confidence interval.
 *
 * Line: x0 = xbar + (y0 - ybar) / b and s_x0 = (s / b) sqrt(1 / (m w0) + 1 / n + (y0 - ybar)^2 / (b^2 Sxx)), m
 * readings of the unknown, centroid and Sxx weighted; through the origin without 1/n and about zero. The interval
 * is x0 +- t s_x0 with the degrees of freedom of the fit. `fieller` is the exact inversion of the confidence
 * band (not symmetric). Parabola: the root inside the calibrated range, error by the delta method with the full
 * covariance. The weight w0 of the unknown follows the model of the weights at x0 when it is not given; given weights
 * are interpolated between the standards.
 *
 * Sources: Miller and Miller ch. 5.6 and 5.10 (weighted); Massart et al., Handbook of Chemometrics and Qualimetrics
 * Part A, 8.2.6 and 8.2.3.2; Draper and Smith, Applied Regression Analysis, 3.2 (Fieller); ISO 8466-2 (parabola).
 *
 * @throws AssayError too-few-values (no reading), slope-not-significant (slope not different from zero at 95 %),
 *         no-root-in-range (the parabola never reaches the reading, or reaches it twice inside the range),
 *         invalid-probability, invalid-weight, non-finite
 */
export function predictConcentration(
  fit: CalibrationFit,
  input: PredictConcentrationInput,
): ConcentrationPrediction {
  requireFit(fit)
  requireObject(input, 'readings of the unknown')
  const readings = Array.from(requireArray(input.absorbances, 'absorbances'), (value, index) =>
    requireFinite(value, 'absorbance', index),
  )
  const confidence = requireProbability(input.confidence ?? 0.95, 'confidence')
  const m = readings.length
  if (m === 0) throw new AssayError('too-few-values', 'There is no reading to compute a concentration from.')
  const absorbance = exactSum(readings) / m
  const { centred, range, degreesOfFreedom } = fit
  const isCurve = fit.model === 'quadratic'
  if (!isCurve) requireSlope(fit, 0)

  const inversion = invertCurve(centred, absorbance, range)
  if (!inversion.found) throw noConcentration(inversion.reason)
  const d = inversion.offset
  const slope = requireSlope(fit, d)
  const concentration = centred.centre + d
  const responseWeight =
    input.responseWeight === undefined
      ? weightAt(fit, concentration)
      : requireWeight(input.responseWeight, 0) * fit.weightScale

  const s = fit.residualStandardDeviation
  const readingVariance = (s / m / responseWeight) * s
  const standardError = Math.sqrt(readingVariance + curveVariance(centred.covariance, d)) / Math.abs(slope)
  const t = tTwoSidedQuantile(confidence, degreesOfFreedom)
  const slack = (range.high - range.low) * 1e-12
  return gate({
    concentration,
    standardError,
    degreesOfFreedom,
    confidence,
    interval: { low: concentration - t * standardError, high: concentration + t * standardError },
    fieller: isCurve ? null : fiellerInterval({ fit, absorbance, readingVariance, t }),
    outsideRange:
      concentration < range.low - slack ? 'below' : concentration > range.high + slack ? 'above' : null,
    absorbance,
    readings: m,
    responseWeight,
    slopeAtConcentration: slope,
    engineVersion: ENGINE_VERSION,
    method: isCurve
      ? 'Inverse prediction from a parabola, delta method with full covariance (ISO 8466-2)'
      : `Inverse prediction from a ${fit.weighting === 'none' ? '' : 'weighted '}line (Miller and Miller, ch. 5; Fieller limits)`,
  })
}

function noConcentration(reason: 'flat' | 'out-of-reach' | 'two-concentrations'): AssayError {
  if (reason === 'flat') {
    return new AssayError(
      'slope-not-significant',
      'The calibration is flat: an absorbance gives no concentration.',
    )
  }
  if (reason === 'out-of-reach') {
    return new AssayError(
      'no-root-in-range',
      'The curve never reaches this absorbance. Dilute and read again.',
    )
  }
  return new AssayError(
    'no-root-in-range',
    'The curve turns inside its range: two concentrations fit this absorbance. Leave out the highest standards.',
  )
}

/**
 * All x with (y0 - ybar - b (x - xbar))^2 <= t^2 (variance of the reading + variance of the line at x). The
 * discriminant is expanded so that its large terms have already cancelled on paper.
 */
function fiellerInterval(given: {
  fit: CalibrationFit
  absorbance: number
  readingVariance: number
  t: number
}): { low: number; high: number } | null {
  const { fit, absorbance, readingVariance, t } = given
  const [constant = 0, b = 0] = fit.centred.coefficients
  const [[c00 = 0, c01 = 0] = [], [, c11 = 0] = []] = fit.centred.covariance
  const difference = absorbance - constant
  // in units of the slope, so that tiny slopes do not underflow
  const reach = difference / b
  const square = t * t
  const v11 = square * (c11 / b / b)
  const v01 = square * (c01 / b / b)
  const v00 = square * ((readingVariance + c00) / b / b)
  const leading = 1 - v11
  if (!(leading > 0)) return null
  const root = Math.sqrt(Math.max(0, 2 * reach * v01 + v01 * v01 + v11 * reach * reach + v00 * leading))
  const middle = reach + v01
  const { centre } = fit.centred
  return { low: centre + (middle - root) / leading, high: centre + (middle + root) / leading }
}
