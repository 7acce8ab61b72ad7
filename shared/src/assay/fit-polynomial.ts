import { requireArray, requireFinite, requireObject } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { requireSpread, requireWeight } from './curve-points.js'
import { gate } from './finite-gate.js'
import { solveLeastSquares, type LeastSquaresSolution } from './least-squares.js'
import { ENGINE_VERSION } from './version.js'

export interface PolynomialPoint {
  x: number
  y: number
  weight?: number | undefined
}

export interface PolynomialFit {
  degree: number
  throughOrigin: boolean
  n: number
  degreesOfFreedom: number
  /** by rising power; through the origin the first is 0 with standard error 0 */
  coefficients: number[]
  standardErrors: number[]
  covariance: number[][]
  residualStandardDeviation: number
  residualSumOfSquares: number
  /** centred, 1 - SSres / SS about the mean; through the origin uncentred, 1 - SSres / sum of y squared */
  rSquared: number
  /** y - fitted, in the order of the points, not multiplied by the weight */
  residuals: number[]
  /** the same curve in powers of x - centre */
  centred: { centre: number; coefficients: number[]; covariance: number[][] }
  engineVersion: string
  method: string
}

/** Highest degree fitted; beyond it even a centred basis says nothing about a calibration. */
const MAX_DEGREE = 12

/**
 * Least-squares polynomial of the given degree, weighted where the points carry weights.
 *
 * Weights are taken as they are (variance of y proportional to 1/weight), as in R's lm: the residual standard
 * deviation is that of a reading of weight 1. A point without a weight among points with one has weight 1.
 *
 * Source: NIST/SEMATECH e-Handbook 4.4.3.1 and 4.4.3.2 (least squares, weighted least squares); the digits
 * certified by the NIST Statistical Reference Datasets come out, least-squares.ts says how. `rSquared` is the
 * uncentred one through the origin, as NIST certifies for NoInt1; it is 0 where the readings do not vary at all.
 *
 * @param points   x and y in any unit
 * @param degree   1 to 12
 * @param options  throughOrigin: leave the constant term out
 * @throws AssayError too-few-points, all-concentrations-equal, non-finite, invalid-weight, invalid-argument,
 *         no-spread (points too close together for the degree), numerical-overflow
 */
export function fitPolynomial(
  points: readonly PolynomialPoint[],
  degree: number,
  options: { throughOrigin?: boolean | undefined } = {},
): PolynomialFit {
  const given = requireArray(points, 'points')
  requireObject(options, 'options')
  const throughOrigin = options.throughOrigin === true
  if (!Number.isInteger(degree) || degree < 1 || degree > MAX_DEGREE) {
    throw new AssayError('invalid-argument', `The degree must be a whole number from 1 to ${MAX_DEGREE}.`)
  }
  const x: number[] = []
  const y: number[] = []
  const weights: number[] = []
  Array.from(given).forEach((point, index) => {
    requireObject(point, 'point')
    x.push(requireFinite(point.x, 'x value', index) + 0)
    y.push(requireFinite(point.y, 'y value', index) + 0)
    weights.push(point.weight === undefined ? 1 : requireWeight(point.weight, index))
  })
  const isWeighted = weights.some((weight) => weight !== 1)
  requireSpread({ x, degree, throughOrigin })
  const solution = solveLeastSquares({
    x,
    y,
    degree,
    throughOrigin,
    weights: isWeighted ? weights : undefined,
  })
  return gate(describeFit({ solution, degree, throughOrigin, n: x.length, isWeighted }))
}

export function describeFit(given: {
  solution: LeastSquaresSolution
  degree: number
  throughOrigin: boolean
  n: number
  isWeighted: boolean
}): PolynomialFit {
  const { solution, degree, throughOrigin, n, isWeighted } = given
  const parameters = degree + (throughOrigin ? 0 : 1)
  const order = degree === 1 ? 'line' : `polynomial of degree ${degree}`
  return {
    degree,
    throughOrigin,
    n,
    degreesOfFreedom: n - parameters,
    coefficients: solution.coefficients,
    standardErrors: solution.covariance.map((row, j) => Math.sqrt(row[j] ?? 0)),
    covariance: solution.covariance,
    residualStandardDeviation: solution.residualStandardDeviation,
    residualSumOfSquares: solution.residualSumOfSquares,
    rSquared: solution.rSquared,
    residuals: solution.residuals,
    centred: solution.centred,
    engineVersion: ENGINE_VERSION,
    method:
      `${isWeighted ? 'Weighted' : 'Ordinary'} least squares, ${order}` +
      `${throughOrigin ? ' through the origin' : ''} (NIST/SEMATECH e-Handbook ${isWeighted ? '4.4.3.2' : '4.4.3.1'})`,
  }
}
