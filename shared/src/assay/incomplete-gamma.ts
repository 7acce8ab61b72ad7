import erfc from '@stdlib/math-base-special-erfc'
import gammainc from '@stdlib/math-base-special-gammainc'
import gammaincinv from '@stdlib/math-base-special-gammaincinv'

/*
 * The regularised incomplete gamma function and its inverse, behind the chi-square distribution.
 *
 * The library is right to 12 digits up to a shape of some dozens, but at 500 it is off by 1e-6 in the far tail and at
 * 50 000 by 1e-2 around the mean, so larger shapes are computed here: series below the mean, continued fraction above
 * (Numerical Recipes, 6.2), the factor before them from Stirling's series around the mean, where x - s - s ln(x / s)
 * keeps its digits. The library's inverse is off by a third at p = 1e-200, and is then only the place to start from.
 */

const LARGE_SHAPE = 50
/** From here on the sums would take too long, and Temme's expansion has all digits. */
const HUGE_SHAPE = 1e8

/** u - 1 - ln u, with its digits around u = 1. */
function phi(u: number): number {
  const m = u - 1
  if (Math.abs(m) > 0.2) return m - Math.log(u)
  let sum = 0
  let power = m
  for (let k = 2; k < 60; k += 1) {
    power *= -m
    const term = -power / k
    sum += term
    if (Math.abs(term) < 1e-18 * Math.abs(sum)) break
  }
  return sum
}

/** x^s e^-x / Gamma(s) for a large s. */
function front(x: number, s: number): number {
  const r = 1 / (s * s)
  const stirling = (1 / 12 - r * (1 / 360 - r * (1 / 1260 - r * (1 / 1680 - r / 1188)))) / s
  return Math.sqrt(s / (2 * Math.PI)) * Math.exp(-s * phi(x / s) - stirling)
}

function lowerSeries(x: number, s: number): number {
  let term = 1 / s
  let sum = term
  for (let n = 1; term > sum * 1e-17; n += 1) {
    term *= x / (s + n)
    sum += term
  }
  return sum
}

/** Lentz's way through the continued fraction of the upper tail. */
function upperFraction(x: number, s: number): number {
  let b = x + 1 - s
  let c = 1e300
  let d = 1 / b
  let value = d
  for (let n = 1; n < 1e6; n += 1) {
    const a = n * (s - n)
    b += 2
    d = 1 / (a * d + b)
    c = b + a / c
    const step = c * d
    value *= step
    if (Math.abs(step - 1) < 1e-16) break
  }
  return value
}

/** Temme's uniform expansion, first two terms (NIST Digital Library of Mathematical Functions, 8.12.3 and 8.12.7). */
function hugeTail(given: { x: number; shape: number; isUpper: boolean }): number {
  const { x, shape } = given
  const m = x / shape - 1
  const half = phi(x / shape)
  const eta = Math.sign(m) * Math.sqrt(2 * half)
  const side = given.isUpper ? 1 : -1
  const first = Math.abs(m) < 1e-4 ? -1 / 3 + eta / 12 : 1 / m - 1 / eta
  const correction = (Math.exp(-shape * half) / Math.sqrt(2 * Math.PI * shape)) * first
  const tail = 0.5 * erfc(side * eta * Math.sqrt(shape / 2)) + side * correction
  return Number.isFinite(tail) ? Math.min(1, Math.max(0, tail)) : 0
}

/** The upper or the lower tail of the gamma distribution of shape s at x. */
export function gammaTail(given: { x: number; shape: number; isUpper: boolean }): number {
  const { x, shape, isUpper } = given
  if (x <= 0) return isUpper ? 1 : 0
  if (shape <= LARGE_SHAPE) return gammainc(x, shape, true, isUpper)
  if (shape > HUGE_SHAPE) return hugeTail(given)
  const factor = front(x, shape)
  const isRight = x >= shape + 1
  // so far out that the factor has vanished, so has the tail
  const tail =
    factor === 0 ? 0 : Math.min(1, factor * (isRight ? upperFraction(x, shape) : lowerSeries(x, shape)))
  return isRight === isUpper ? tail : 1 - tail
}

/** x at which the upper tail is p, bracketed and halved down to the last bit on the smaller tail. */
export function gammaUpperQuantile(p: number, shape: number): number {
  const isUpper = p <= 0.5
  const target = isUpper ? p : 1 - p
  const isBelow = (x: number) => gammaTail({ x, shape, isUpper }) > target === isUpper
  const guess = shape > LARGE_SHAPE ? shape : gammaincinv(p, shape, true)
  // here the library is right, and results are kept with its last digit
  if (shape <= LARGE_SHAPE && p >= 1e-20) return guess
  const start = guess > 0 && Number.isFinite(guess) ? guess : shape
  let low = start
  for (let reach = 1e-4; low > 0 && !isBelow(low); reach *= 4)
    low = reach < 1 ? start * (1 - reach) : low / 16
  let high = start
  for (let reach = 1e-4; high < Infinity && isBelow(high); reach *= 4) high = start * (1 + reach)
  for (;;) {
    const middle = low + (high - low) / 2
    if (!(middle > low && middle < high)) return high
    if (isBelow(middle)) low = middle
    else high = middle
  }
}
