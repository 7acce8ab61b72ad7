import betainc from '@stdlib/math-base-special-betainc'
import erfc from '@stdlib/math-base-special-erfc'
import erfcinv from '@stdlib/math-base-special-erfcinv'
import fQuantile from '@stdlib/stats-base-dists-f-quantile'
import tQuantile from '@stdlib/stats-base-dists-t-quantile'
import { AssayError } from './assay-error.js'
import { finiteResult, requireFinite } from './argument-checks.js'
import { gammaTail, gammaUpperQuantile } from './incomplete-gamma.js'

/**
 * Quantiles and probabilities of the t, F, chi-square and normal distributions.
 *
 * All work from the upper tail: a probability of 1e-60 comes out with its digits, where 1 - cdf would give 0. The
 * tails are regularised incomplete beta and gamma functions and the complementary error function; the quantiles
 * take the small tail as it is and use the symmetry of t and the reciprocal of F instead of 1 - alpha.
 */

export function requireProbability(value: unknown, what: string): number {
  if (typeof value === 'number' && value > 0 && value < 1) return value
  throw new AssayError('invalid-probability', `The ${what} must lie between 0 and 1, both excluded.`)
}

function requireDegreesOfFreedom(value: unknown): number {
  if (typeof value === 'number' && value > 0 && Number.isFinite(value)) return value
  throw new AssayError('invalid-argument', 'The degrees of freedom must be above zero.')
}

/** Share of t^2 or F below which the body of the distribution is computed instead of its tail. */
const NEAR_ZERO = 1e-8

// quantiles cost some microseconds and a batch asks for the same few again and again
const remembered = new Map<string, number>()

function remember(key: string, compute: () => number): number {
  const known = remembered.get(key)
  if (known !== undefined) return known
  const value = finiteResult(compute(), 'quantile')
  if (remembered.size >= 500) remembered.clear()
  remembered.set(key, value)
  return value
}

/** t with P(T > t) = alpha. */
export function tUpperQuantile(alpha: number, degreesOfFreedom: number): number {
  const p = requireProbability(alpha, 'significance level')
  const df = requireDegreesOfFreedom(degreesOfFreedom)
  return remember(`t ${p} ${df}`, () => {
    const t = -tQuantile(p, df)
    return Number.isFinite(t) || df > 100 ? t : farTQuantile(p, df)
  })
}

/*
 * So far out that t squared leaves the range of doubles, the tail falls with the power of the degrees of freedom alone:
 * it is scaled from a t at which the beta function still answers and is already a pure power. Such a t needs few degrees
 * of freedom.
 */
function farTQuantile(alpha: number, df: number): number {
  const known = 1e10 * Math.sqrt(df)
  return known * (tTwoSidedProbability(known, df) / 2 / alpha) ** (1 / df)
}

function farTProbability(t: number, df: number): number {
  if (df > 100) return 0
  const known = 1e10 * Math.sqrt(df)
  return tTwoSidedProbability(known, df) * (known / t) ** df
}

/** t of a two-sided interval: P(-t < T < t) = confidence. */
export function tTwoSidedQuantile(confidence: number, degreesOfFreedom: number): number {
  const p = requireProbability(confidence, 'confidence')
  return tUpperQuantile((1 - p) / 2, degreesOfFreedom)
}

/** F with P(F > f) = alpha. */
export function fUpperQuantile(alpha: number, df1: number, df2: number): number {
  const p = requireProbability(alpha, 'significance level')
  const a = requireDegreesOfFreedom(df1)
  const b = requireDegreesOfFreedom(df2)
  return remember(`f ${p} ${a} ${b}`, () => 1 / fQuantile(p, b, a))
}

/** x with P(chi-square > x) = alpha. */
export function chiSquareUpperQuantile(alpha: number, degreesOfFreedom: number): number {
  const p = requireProbability(alpha, 'significance level')
  const df = requireDegreesOfFreedom(degreesOfFreedom)
  return remember(`c ${p} ${df}`, () => 2 * gammaUpperQuantile(p, df / 2))
}

/** z with P(Z > z) = alpha. */
export function normalUpperQuantile(alpha: number): number {
  const p = requireProbability(alpha, 'significance level')
  return remember(`n ${p}`, () => Math.SQRT2 * erfcinv(2 * p))
}

/** P(|T| > |t|). */
export function tTwoSidedProbability(t: number, degreesOfFreedom: number): number {
  const value = Math.abs(requireFinite(t, 't value'))
  const df = requireDegreesOfFreedom(degreesOfFreedom)
  const square = value * value
  if (!(square < Number.MAX_VALUE / 2)) return finiteResult(farTProbability(value, df), 'probability')
  // near zero df / (df + t^2) is 1 but for its last bits: the other tail has the digits
  const body = square / (df + square)
  if (body < NEAR_ZERO) return finiteResult(1 - betainc(body, 0.5, df / 2, true, false), 'probability')
  return finiteResult(betainc(df / (df + square), df / 2, 0.5, true, false), 'probability')
}

/** P(T > t). */
export function tUpperProbability(t: number, degreesOfFreedom: number): number {
  const half = tTwoSidedProbability(t, degreesOfFreedom) / 2
  return t >= 0 ? half : 1 - half
}

/** P(F > f). */
export function fUpperProbability(f: number, df1: number, df2: number): number {
  const value = requireFinite(f, 'F value')
  const a = requireDegreesOfFreedom(df1)
  const b = requireDegreesOfFreedom(df2)
  if (value <= 0) return 1
  if (!Number.isFinite(a * value)) return 0
  const body = (a * value) / (b + a * value)
  if (body < NEAR_ZERO) return finiteResult(1 - betainc(body, a / 2, b / 2, true, false), 'probability')
  return finiteResult(betainc(b / (b + a * value), b / 2, a / 2, true, false), 'probability')
}

/** P(chi-square > x). */
export function chiSquareUpperProbability(x: number, degreesOfFreedom: number): number {
  const value = requireFinite(x, 'chi-square value')
  const df = requireDegreesOfFreedom(degreesOfFreedom)
  if (value <= 0) return 1
  return finiteResult(gammaTail({ x: value / 2, shape: df / 2, isUpper: true }), 'probability')
}

/** P(Z > z). */
export function normalUpperProbability(z: number): number {
  return 0.5 * erfc(requireFinite(z, 'normal deviate') / Math.SQRT2)
}
