import { ExactSum } from './double-double.js'

/** A line or parabola in powers of d = x - centre: constant, slope, curvature. */
export interface CentredCurve {
  centre: number
  coefficients: readonly number[]
}

export type Inversion =
  { found: true; offset: number } | { found: false; reason: 'flat' | 'out-of-reach' | 'two-concentrations' }

/** Slope of the curve at d. */
export function slopeAt(curve: CentredCurve, d: number): number {
  const [, b = 0, a = 0] = curve.coefficients
  return b + 2 * a * d
}

/**
 * The offset d from the centre at which the curve takes the value y.
 *
 * A parabola gives two: the one inside the calibrated range counts. Where none is inside, the one on the branch on
 * which the middle of the range lies. Two inside the range cannot be told apart and are refused.
 * The roots come from q = -(b + sign(b) sqrt(b^2 - 4 a c)) / 2 as q / a and c / q, so that no digits cancel, and the
 * discriminant is taken in double-double (Numerical Recipes, section 5.6).
 */
export function invertCurve(curve: CentredCurve, y: number, range: { low: number; high: number }): Inversion {
  const [constant = 0, b = 0, a = 0] = curve.coefficients
  if (a === 0 && b === 0) return { found: false, reason: 'flat' }
  const sum = new ExactSum().set(constant).add(-y)
  const c = sum.hi
  const cLo = sum.lo
  if (a === 0) return { found: true, offset: -c / b }

  const discriminant = sum
    .set(0)
    .addProduct(b, 0, b, 0)
    .addProduct(-4 * a, 0, c, cLo).value
  if (!(discriminant >= 0)) return { found: false, reason: 'out-of-reach' }
  const root = Math.sqrt(discriminant)
  const q = b >= 0 ? -(b + root) / 2 : -(b - root) / 2
  const candidates = [q / a, q === 0 ? 0 : c / q].filter(Number.isFinite)

  const low = range.low - curve.centre
  const high = range.high - curve.centre
  const slack = (high - low) * 1e-12
  const inside = candidates.filter((d) => d >= low - slack && d <= high + slack)
  const [first, second] = inside
  if (first !== undefined && second !== undefined && Math.abs(first - second) > slack) {
    return { found: false, reason: 'two-concentrations' }
  }
  if (first !== undefined) return { found: true, offset: first }

  const vertex = -b / (2 * a)
  const isRangeRight = (low + high) / 2 >= vertex
  const offset = isRangeRight ? Math.max(...candidates) : Math.min(...candidates)
  return Number.isFinite(offset) ? { found: true, offset } : { found: false, reason: 'out-of-reach' }
}

/** Variance of the fitted curve at d, from the covariance at the centre; never below zero. */
export function curveVariance(covariance: readonly (readonly number[])[], d: number): number {
  let sum = 0
  let left = 1
  for (const row of covariance) {
    let right = left
    for (const value of row) {
      sum += value * right
      right *= d
    }
    left *= d
  }
  return Math.max(0, sum)
}
