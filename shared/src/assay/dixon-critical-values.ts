import { normalUpperProbability } from './distributions.js'

/**
 * Critical values of Dixon's ratio r10, two-sided, for n = 3 to 20 at 90, 95 and 99 % confidence.
 * Rorabacher, Anal. Chem. 63 (1991) 139, table 1, read in a published copy.
 */
const RORABACHER: readonly (readonly [number, number, number])[] = [
  [0.941, 0.97, 0.994],
  [0.765, 0.829, 0.926],
  [0.642, 0.71, 0.821],
  [0.56, 0.625, 0.74],
  [0.507, 0.568, 0.68],
  [0.468, 0.526, 0.634],
  [0.437, 0.493, 0.598],
  [0.412, 0.466, 0.568],
  [0.392, 0.444, 0.542],
  [0.376, 0.426, 0.522],
  [0.361, 0.41, 0.503],
  [0.349, 0.396, 0.488],
  [0.338, 0.384, 0.475],
  [0.329, 0.374, 0.463],
  [0.32, 0.365, 0.452],
  [0.313, 0.356, 0.442],
  [0.306, 0.349, 0.433],
  [0.3, 0.342, 0.425],
]

const COLUMNS: readonly number[] = [0.1, 0.05, 0.01]

/** The printed value for a two-sided level, or undefined where the table has none. */
export function printedDixonCritical(n: number, twoSidedAlpha: number): number | undefined {
  const column = COLUMNS.findIndex((alpha) => Math.abs(alpha - twoSidedAlpha) < 1e-12)
  return RORABACHER[n - 3]?.[column]
}

/** Nodes and weights of Gauss and Legendre on (-1, 1), by Newton steps on the polynomial. */
function gaussLegendre(count: number): { node: number; weight: number }[] {
  return Array.from({ length: count }, (_, i) => {
    let x = Math.cos((Math.PI * (i + 0.75)) / (count + 0.5))
    let slope = 1
    for (let step = 0; step < 100; step += 1) {
      let p = 1
      let before = 0
      for (let j = 1; j <= count; j += 1) {
        const next = ((2 * j - 1) * x * p - (j - 1) * before) / j
        before = p
        p = next
      }
      slope = (count * (x * p - before)) / (x * x - 1)
      const change = p / slope
      x -= change
      if (Math.abs(change) < 1e-15) break
    }
    return { node: x, weight: 2 / ((1 - x * x) * slope * slope) }
  })
}

let grid: { node: number; weight: number }[] | undefined

function density(x: number): number {
  return Math.exp((-x * x) / 2) / Math.sqrt(2 * Math.PI)
}

/** Normal probability between a and b, from the nearer tail. */
function between(a: number, b: number): number {
  return a > 0
    ? normalUpperProbability(a) - normalUpperProbability(b)
    : normalUpperProbability(-b) - normalUpperProbability(-a)
}

/**
 * P(r10 > r) for the gap at one given end of n normal values.
 *
 * With the smallest value at u and the greatest at u + w, all others must lie below u + (1 - r) w:
 * n (n-1) times the double integral of phi(u) phi(u+w) [Phi(u + (1-r) w) - Phi(u)]^(n-2) (Dixon 1950; McBane 2006).
 */
export function dixonTail(r: number, n: number): number {
  if (r <= 0) return 1
  if (r >= 1) return 0
  grid ??= gaussLegendre(64)
  let sum = 0
  for (const outer of grid) {
    const u = 8 * outer.node
    let inner = 0
    for (const { node, weight } of grid) {
      const w = 7 * (node + 1)
      inner += weight * density(u + w) * between(u, u + (1 - r) * w) ** (n - 2)
    }
    sum += outer.weight * density(u) * inner
  }
  return Math.min(1, Math.max(0, n * (n - 1) * 8 * 7 * sum))
}

/** The r with dixonTail(r, n) = tail, by halving. */
export function dixonQuantile(tail: number, n: number): number {
  let low = 0
  let high = 1
  for (let step = 0; step < 40; step += 1) {
    const middle = (low + high) / 2
    if (dixonTail(middle, n) > tail) low = middle
    else high = middle
  }
  return (low + high) / 2
}
