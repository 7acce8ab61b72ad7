import { requireObject, requireOneOf } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { tTwoSidedProbability, tTwoSidedQuantile } from './distributions.js'
import { gate } from './finite-gate.js'
import type { CalibrationFit } from './fit-calibration.js'
import { rootOfSquares } from './root-of-squares.js'
import { requireFit } from './stored-fit.js'
import { ENGINE_VERSION } from './version.js'

export interface SlopeComparison {
  /** slope of a less slope of b over its standard error */
  tValue: number
  degreesOfFreedom: number
  probability: number
  criticalValue95: number
  verdict95: 'equal' | 'different'
  difference: number
  /** 100 (slope of a - slope of b) / slope of b */
  differencePercent: number
  variances: 'pooled' | 'separate'
  engineVersion: string
  method: string
}

/**
 * Do two calibration lines have the same slope? For a new reagent lot (a) against the one in use (b).
 *
 * 'pooled': both lines scatter alike, s_p^2 = (SS_a + SS_b) / (f_a + f_b), t = (b_a - b_b) / (s_p sqrt(1/Sxx_a +
 * 1/Sxx_b)) with f_a + f_b degrees of freedom. 'separate': t over the root of the summed variances, degrees of
 * freedom by Welch and Satterthwaite; take it where the residual spreads differ.
 *
 * Sources: Andrade and Estevez-Perez, Anal. Chim. Acta 838 (2014) 1, sections 2.1 and 2.2; Zar, Biostatistical
 * Analysis, ch. 18.
 *
 * @param options variances: 'pooled' when left out
 * @throws AssayError invalid-argument (a parabola has no one slope; slope of b zero), no-spread (both lines exact)
 */
export function slopeComparison(
  a: CalibrationFit,
  b: CalibrationFit,
  options: { variances?: 'pooled' | 'separate' | undefined } = {},
): SlopeComparison {
  requireObject(options, 'options')
  const variances = requireOneOf(options.variances ?? 'pooled', ['pooled', 'separate'], 'variances')
  const first = readSlope(a)
  const second = readSlope(b)
  if (second.slope === 0) throw new AssayError('invalid-argument', 'The slope compared with is zero.')
  const difference = first.slope - second.slope
  const { error, degreesOfFreedom } = variances === 'pooled' ? pooled(first, second) : separate(first, second)
  // slopes are known to 52 bits at best; without any scatter nothing can be said about the difference
  if (!(error > 2 ** -52 * Math.max(Math.abs(first.slope), Math.abs(second.slope)))) {
    throw new AssayError('no-spread', 'Both lines are exact: there is no scatter to compare the slopes with.')
  }
  const tValue = difference / error
  const criticalValue95 = tTwoSidedQuantile(0.95, degreesOfFreedom)
  return gate({
    tValue,
    degreesOfFreedom,
    probability: tTwoSidedProbability(tValue, degreesOfFreedom),
    criticalValue95,
    verdict95: Math.abs(tValue) > criticalValue95 ? 'different' : 'equal',
    difference,
    differencePercent: 100 * (difference / second.slope),
    variances,
    engineVersion: ENGINE_VERSION,
    method: `Comparison of two slopes, ${variances} variances (Andrade and Estevez-Perez 2014)`,
  })
}

interface Slope {
  slope: number
  /** standard error of the slope */
  error: number
  s: number
  degreesOfFreedom: number
}

function readSlope(fit: CalibrationFit): Slope {
  requireFit(fit)
  if (fit.model === 'quadratic') {
    throw new AssayError('invalid-argument', 'A parabola has no one slope. Compare straight lines.')
  }
  return {
    slope: fit.centred.coefficients[1] ?? 0,
    error: Math.sqrt(Math.max(0, fit.centred.covariance[1]?.[1] ?? 0)),
    s: fit.residualStandardDeviation,
    degreesOfFreedom: fit.degreesOfFreedom,
  }
}

function pooled(a: Slope, b: Slope) {
  const degreesOfFreedom = a.degreesOfFreedom + b.degreesOfFreedom
  const largest = Math.max(a.s, b.s)
  if (largest === 0) return { error: 0, degreesOfFreedom }
  const variance =
    ((a.s / largest) * (a.s / largest) * a.degreesOfFreedom +
      (b.s / largest) * (b.s / largest) * b.degreesOfFreedom) /
    degreesOfFreedom
  const s = largest * Math.sqrt(variance)
  // a line without scatter has no Sxx left in its covariance; its slope then counts as exact
  const part = (one: Slope) => (one.s > 0 ? (one.error / one.s) * s : 0)
  return { error: rootOfSquares([part(a), part(b)]), degreesOfFreedom }
}

function separate(a: Slope, b: Slope) {
  const error = rootOfSquares([a.error, b.error])
  if (error === 0) return { error: 0, degreesOfFreedom: a.degreesOfFreedom + b.degreesOfFreedom }
  const shareA = (a.error / error) * (a.error / error)
  const shareB = (b.error / error) * (b.error / error)
  const degreesOfFreedom =
    1 / ((shareA * shareA) / a.degreesOfFreedom + (shareB * shareB) / b.degreesOfFreedom)
  return { error, degreesOfFreedom }
}
