import { largestOf } from './descriptive-statistics.js'
import {
  ExactSum,
  exactList,
  exactSum,
  powerOfTwoOf,
  shiftPolynomial,
  type ExactList,
} from './double-double.js'
import {
  factor,
  fillDesign,
  invertTriangle,
  leveragesOf,
  refine,
  type Design,
} from './least-squares-design.js'

/*
 * The one least-squares routine behind every fit.
 *
 * Why not simple-statistics' line: version 7.12 centres before it multiplies, so its slope keeps all digits on
 * NIST's Norris set and on the same set moved by 1e9; its intercept loses two or three of sixteen (2e-13 on Norris,
 * statistics.properties.spec.ts compares both with exact whole-number answers). It knows neither weights, standard
 * errors nor powers. Why not a plain QR of powers of x: NIST's Wampler 5 keeps half of its 13 certified digits there.
 * One path for all fits also means that a line fitted as a line or as a polynomial of degree 1 is the same to the
 * last bit.
 *
 * The path here: x is centred on its weighted mean and scaled by a power of two (both without rounding, in
 * double-double), y is scaled by a power of two, the powers are factored by Householder QR (ml-matrix), and the
 * solution is refined on the triangular factor with residuals in double-double until it stands still. The
 * change back to powers of x is done in double-double as well, because its terms cancel.
 */

export interface LeastSquaresInput {
  x: readonly number[]
  y: readonly number[]
  /** positive; all 1 when left out */
  weights?: readonly number[] | undefined
  degree: number
  throughOrigin: boolean
}

export interface LeastSquaresSolution {
  /** by rising power of x; entry 0 is 0 through the origin */
  coefficients: number[]
  /** of the coefficients, for the residual standard deviation below */
  covariance: number[][]
  residuals: number[]
  residualSumOfSquares: number
  rSquared: number
  residualStandardDeviation: number
  /** the same curve in powers of x - centre, where the errors of the coefficients hardly depend on one another */
  centred: { centre: number; coefficients: number[]; covariance: number[][] }
  /** diagonal of the hat matrix: how far each point determines its own fitted value */
  leverages: number[]
}

export function solveLeastSquares(input: LeastSquaresInput): LeastSquaresSolution {
  const { x, y, degree, throughOrigin } = input
  const n = x.length
  const first = throughOrigin ? 1 : 0
  const columns = degree + 1 - first
  const roots = Float64Array.from({ length: n }, (_, i) => Math.sqrt(input.weights?.[i] ?? 1))

  const xScale = powerOfTwoOf(largestOf(x))
  const yScale = powerOfTwoOf(largestOf(y))
  const scaledX = x.map((value) => value / xScale)
  const centre = throughOrigin ? 0 : weightedMean(scaledX, input.weights)
  const spread = powerOfTwoOf(largestOf(scaledX.map((value) => value - centre)))

  const design: Design = {
    rows: n,
    columns,
    values: exactList(n * columns),
    response: exactList(n),
  }
  fillDesign({ design, scaledX, centre, spread, roots, first, y, yScale })

  const triangle = factor(design)
  const { solution, residuals } = refine(design, triangle)
  const inverse = invertTriangle(triangle)

  const residualSumOfSquares = exactSum(Array.from(residuals, (r) => r * r))
  const totalSumOfSquares = totalSquares({ y, yScale, weights: input.weights, isCentred: !throughOrigin })
  const residualStandardDeviation = Math.sqrt(residualSumOfSquares / (n - columns))

  const back = { first, spread, xScale, yScale, s: residualStandardDeviation }
  const atCentre = curveAt({ ...back, shift: 0, solution, inverse })
  const atZero = curveAt({ ...back, shift: centre, solution, inverse })
  return {
    coefficients: atZero.coefficients,
    covariance: atZero.covariance,
    residuals: Array.from(residuals, (r, i) => (r / (roots[i] ?? 1)) * yScale),
    residualSumOfSquares: residualSumOfSquares * yScale * yScale,
    rSquared: rSquaredOf(residualSumOfSquares, totalSumOfSquares),
    residualStandardDeviation: residualStandardDeviation * yScale,
    centred: { centre: centre * xScale, ...atCentre },
    leverages: leveragesOf(design, inverse),
  }
}

/** 1 - SSres / SStot from the scaled sums, so that tiny and huge readings keep it; 0 where the readings do not vary. */
function rSquaredOf(residual: number, total: number): number {
  if (total <= 0) return 0
  return Math.min(1, Math.max(0, 1 - residual / total))
}

function weightedMean(values: readonly number[], weights: readonly number[] | undefined): number {
  if (!weights) return exactSum(values) / values.length
  const sum = new ExactSum()
  values.forEach((value, i) => sum.addProduct(value, 0, weights[i] ?? 1, 0))
  return sum.value / exactSum(weights)
}

function totalSquares(given: {
  y: readonly number[]
  yScale: number
  weights: readonly number[] | undefined
  isCentred: boolean
}): number {
  const scaled = given.y.map((value) => value / given.yScale)
  const mean = given.isCentred ? weightedMean(scaled, given.weights) : 0
  return exactSum(scaled.map((value, i) => (value - mean) * (value - mean) * (given.weights?.[i] ?? 1)))
}

/** Coefficients and covariance in powers of x (shift = centre) or of x - centre (shift = 0), in the given units. */
function curveAt(given: {
  shift: number
  first: number
  spread: number
  xScale: number
  yScale: number
  s: number
  solution: ExactList
  inverse: number[][]
}): { coefficients: number[]; covariance: number[][] } {
  const { shift, first, spread, xScale, yScale, s, solution, inverse } = given
  const size = solution.hi.length + first
  const units = new Float64Array(size)
  const shifted = (hi: ArrayLike<number>, lo?: ArrayLike<number>): Float64Array => {
    const list = exactList(size)
    let scale = 1
    for (let power = 0; power < size; power += 1) {
      list.hi[power] = power < first ? 0 : (hi[power - first] ?? 0) / scale
      list.lo[power] = power < first ? 0 : (lo?.[power - first] ?? 0) / scale
      scale *= spread
    }
    if (shift !== 0) shiftPolynomial(list, shift)
    return list.hi
  }
  let unit = yScale
  for (let power = 0; power < size; power += 1) {
    units[power] = unit
    unit /= xScale
  }
  const coefficients = Array.from(shifted(solution.hi, solution.lo), (c, power) => c * (units[power] ?? 0))
  const roots = inverse.map((column) => shifted(column))
  const covariance = coefficients.map((_, j) =>
    coefficients.map((__, k) => {
      let sum = 0
      for (const column of roots) sum += (column[j] ?? 0) * (column[k] ?? 0)
      return sum * (s * (units[j] ?? 0) * (s * (units[k] ?? 0)))
    }),
  )
  return { coefficients, covariance }
}
