import { AssayError } from './assay-error.js'

function finite(value: number): number {
  if (Number.isFinite(value)) return value === 0 ? 0 : value
  throw new AssayError(
    'numerical-overflow',
    'These numbers are too large or too small to compute with. Check the unit.',
  )
}

function clean(part: object): void {
  const entries = part as Record<string, unknown>
  // no Object.keys: this runs for every reading of a keystroke's preview
  for (const key in entries) {
    const value = entries[key]
    if (typeof value === 'number') {
      if (value === 0 || !Number.isFinite(value)) entries[key] = finite(value)
    } else if (typeof value === 'object' && value !== null) clean(value)
  }
}

/**
 * Last gate of every statistical function: no NaN or Infinity leaves, and -0 leaves as 0, so that a result reads
 * back from JSON as the same double. Works in place on the object the function has just made.
 */
export function gate<const T extends object>(result: T): T {
  clean(result)
  return result
}
