import { requireFinite, requireObject, requireOneOf } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { WEIGHTINGS } from './calibration-weights.js'
import { tTwoSidedQuantile } from './distributions.js'
import { curveVariance, slopeAt } from './curve-inversion.js'
import { CALIBRATION_MODELS, type CalibrationFit } from './fit-calibration.js'

/** A fit may come back from storage: looks at every number the readings are computed from. */
export function requireFit(fit: CalibrationFit, what = 'fit'): CalibrationFit {
  requireObject(fit, what)
  requireOneOf(fit.model, CALIBRATION_MODELS, 'model of the fit')
  requireOneOf(fit.weighting, WEIGHTINGS, 'weighting of the fit')
  const size = fit.model === 'quadratic' ? 3 : 2
  requireObject(fit.centred, 'centred curve of the fit')
  requireObject(fit.range, 'range of the fit')
  requireNumbers(fit.centred.coefficients, size)
  requireLength(fit.centred.covariance, size).forEach((row) => requireNumbers(row, size))
  const numbers = [fit.centred.centre, fit.range.low, fit.range.high, fit.weightScale]
  numbers.forEach((value) => requireFinite(value, 'number in the fit'))
  if (!(requireFinite(fit.residualStandardDeviation, 'residual standard deviation') >= 0)) throw broken()
  if (!(Number.isInteger(fit.degreesOfFreedom) && fit.degreesOfFreedom > 0)) throw broken()
  if (!(Number.isInteger(fit.n) && fit.n > 0) || !(fit.weightScale > 0)) throw broken()
  if (fit.weighting !== 'none') {
    if (!Array.isArray(fit.readBack) || fit.readBack.length === 0) throw broken()
    fit.readBack.forEach((row, index) => {
      requireObject(row, 'standard of the fit')
      requireFinite(row.concentration, 'concentration of a standard', index)
      if (!(requireFinite(row.weight, 'weight of a standard', index) > 0)) throw broken()
    })
  }
  return fit
}

function broken(): AssayError {
  return new AssayError('invalid-argument', 'This is not a complete fit. Fit the calibration again.')
}

function requireLength<T>(list: readonly T[], size: number): readonly T[] {
  if (!Array.isArray(list) || list.length !== size) throw broken()
  return list
}

function requireNumbers(list: readonly number[], size: number): void {
  requireLength(list, size).forEach((value) => requireFinite(value, 'number in the fit'))
}

/**
 * Refuses where the curve is not clearly rising or falling at d: its slope must differ from zero at 95 % confidence,
 * or a reading says nothing about the concentration.
 */
export function requireSlope(fit: CalibrationFit, d: number): number {
  const slope = slopeAt(fit.centred, d)
  const { covariance } = fit.centred
  // variance of b + 2 a d is the curve variance of the derivative's coefficients
  const derivative = covariance
    .slice(1)
    .map((row, j) => row.slice(1).map((value, k) => value * (j + 1) * (k + 1)))
  const error = Math.sqrt(curveVariance(derivative, d))
  if (Math.abs(slope) > error * tTwoSidedQuantile(0.95, fit.degreesOfFreedom)) return slope
  throw new AssayError(
    'slope-not-significant',
    'The slope cannot be told from zero here, so an absorbance gives no concentration. Check the standards.',
  )
}
