import { largestOf } from './descriptive-statistics.js'

/** Square root of a sum of squares without overflow on the way (Math.hypot may differ from machine to machine). */
export function rootOfSquares(values: readonly number[]): number {
  const largest = largestOf(values)
  if (largest === 0) return 0
  return largest * Math.sqrt(values.reduce((sum, value) => sum + (value / largest) * (value / largest), 0))
}
