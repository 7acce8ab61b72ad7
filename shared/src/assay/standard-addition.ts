import { requireArray, requireFinite, requireObject } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { requireSpread } from './curve-points.js'
import { requireProbability, tTwoSidedQuantile } from './distributions.js'
import { gate } from './finite-gate.js'
import { solveLeastSquares } from './least-squares.js'
import { ENGINE_VERSION } from './version.js'

export type StandardAdditionPoint =
  | { added: number; absorbance: number }
  | { concentration: number; absorbance: number }
  | { x: number; y: number }

export interface StandardAddition {
  concentration: number
  standardError: number
  degreesOfFreedom: number
  interval: { low: number; high: number }
  slope: number
  intercept: number
  slopeStandardError: number
  interceptStandardError: number
  residualStandardDeviation: number
  engineVersion: string
  method: string
}

/**
 * Standard addition by extrapolation: the concentration of the sample is intercept / slope.
 *
 * s_x = (s / |b|) sqrt(1/n + ybar^2 / (b^2 Sxx)), n - 2 degrees of freedom. The concentration is that of the measured
 * solution, in the unit of the additions, which must refer to the same final volume.
 *
 * Source: Miller and Miller, Statistics and Chemometrics for Analytical Chemistry, section 5.8; DIN 32633.
 *
 * @param points added concentration and absorbance, one entry a reading
 * @param options confidence of the interval, 0.95 when left out
 * @throws AssayError too-few-points, all-concentrations-equal, negative-concentration, slope-not-significant
 */
export function standardAddition(
  points: readonly StandardAdditionPoint[],
  options: { confidence?: number | undefined } = {},
): StandardAddition {
  requireObject(options, 'options')
  const confidence = requireProbability(options.confidence ?? 0.95, 'confidence')
  const x: number[] = []
  const y: number[] = []
  Array.from(requireArray(points, 'additions')).forEach((point, index) => {
    requireObject(point, 'addition')
    const added = 'added' in point ? point.added : 'concentration' in point ? point.concentration : point.x
    const addition = requireFinite(added, 'added concentration', index)
    if (addition < 0) {
      throw new AssayError('negative-concentration', 'An addition cannot be negative.', index)
    }
    x.push(addition + 0)
    y.push(requireFinite('y' in point ? point.y : point.absorbance, 'absorbance', index) + 0)
  })
  requireSpread({ x, degree: 1, throughOrigin: false })
  const solution = solveLeastSquares({ x, y, degree: 1, throughOrigin: false })
  const { centre, coefficients, covariance } = solution.centred
  const [constant = 0, slope = 0] = coefficients
  const [[c00 = 0, c01 = 0] = [], [, c11 = 0] = []] = covariance
  const degreesOfFreedom = x.length - 2
  if (!(Math.abs(slope) > tTwoSidedQuantile(0.95, degreesOfFreedom) * Math.sqrt(c11))) {
    throw new AssayError(
      'slope-not-significant',
      'The additions do not change the absorbance: nothing to extrapolate.',
    )
  }
  // the line meets zero absorbance at -concentration
  const reach = constant / slope
  const concentration = reach - centre
  const variance = Math.max(0, c00 - 2 * reach * c01 + reach * reach * c11)
  const standardError = Math.sqrt(variance) / Math.abs(slope)
  const t = tTwoSidedQuantile(confidence, degreesOfFreedom)
  return gate({
    concentration,
    standardError,
    degreesOfFreedom,
    interval: { low: concentration - t * standardError, high: concentration + t * standardError },
    slope,
    intercept: solution.coefficients[0] ?? 0,
    slopeStandardError: Math.sqrt(c11),
    interceptStandardError: Math.sqrt(solution.covariance[0]?.[0] ?? 0),
    residualStandardDeviation: solution.residualStandardDeviation,
    engineVersion: ENGINE_VERSION,
    method: 'Standard addition by extrapolation (Miller and Miller, section 5.8)',
  })
}
