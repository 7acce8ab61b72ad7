import { requireFinite, requireObject } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { curveVariance } from './curve-inversion.js'
import { requireProbability, tTwoSidedQuantile } from './distributions.js'
import { gate } from './finite-gate.js'
import type { CalibrationFit } from './fit-calibration.js'
import { requireFit } from './stored-fit.js'

export interface CurveBandInput {
  /** from 0 or the lowest standard when left out */
  from?: number | undefined
  /** to the highest standard when left out */
  to?: number | undefined
  /** how many points, 2 to 500; 41 when left out */
  count?: number | undefined
  /** 0.95 when left out */
  confidence?: number | undefined
}

/**
 * The fitted curve with the confidence band of its mean, for drawing: f(x) +- t s_f(x), where s_f follows from the full
 * covariance of the coefficients. A picture of the curve's own uncertainty; the uncertainty of an unknown is
 * `predictConcentration`.
 *
 * Source: Draper and Smith, Applied Regression Analysis, 3rd edition, 3.1 (confidence interval for the mean response).
 *
 * @returns points { concentration, fitted, low, high } from left to right, confidence, method
 * @throws AssayError invalid-argument: not a fit, ends in the wrong order, count outside 2 to 500; invalid-probability
 */
export function curveBand(fit: CalibrationFit, input: CurveBandInput = {}) {
  requireFit(fit)
  requireObject(input, 'range of the band')
  const from = requireFinite(input.from ?? Math.min(0, fit.range.low), 'start of the band')
  const to = requireFinite(input.to ?? fit.range.high, 'end of the band')
  const count = requireFinite(input.count ?? 41, 'number of points')
  const confidence = requireProbability(input.confidence ?? 0.95, 'confidence')
  if (from >= to) throw new AssayError('invalid-argument', 'The band must start below where it ends.')
  if (!Number.isInteger(count) || count < 2 || count > 500) {
    throw new AssayError('invalid-argument', 'A band has 2 to 500 points.')
  }
  const { centre, coefficients, covariance } = fit.centred
  const t = tTwoSidedQuantile(confidence, fit.degreesOfFreedom)
  const points = Array.from({ length: count }, (_, index) => {
    const concentration = index === count - 1 ? to : from + (index * (to - from)) / (count - 1)
    const d = concentration - centre
    const fitted = coefficients.reduceRight((sum, coefficient) => sum * d + coefficient, 0)
    const half = t * Math.sqrt(curveVariance(covariance, d))
    return { concentration, fitted, low: fitted - half, high: fitted + half }
  })
  return gate({ points, confidence, method: 'confidence band of the mean response' })
}
