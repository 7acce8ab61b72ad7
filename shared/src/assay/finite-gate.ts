import { AssayError } from './assay-error.js'

function clean(value: unknown): unknown {
  if (typeof value === 'number') {
    if (!Number.isFinite(value)) {
      throw new AssayError(
        'numerical-overflow',
        'These numbers are too large or too small to compute with. Check the unit.',
      )
    }
    return value === 0 ? 0 : value
  }
  if (typeof value !== 'object' || value === null) return value
  const entries = value as Record<string, unknown>
  for (const key of Object.keys(entries)) {
    const before = entries[key]
    if (typeof before === 'string') continue
    const after = clean(before)
    if (!Object.is(before, after)) entries[key] = after
  }
  return value
}

/**
 * Last gate of every statistical function: no NaN or Infinity leaves, and -0 leaves as 0, so that a result reads
 * back from JSON as the same double. Works in place on the object the function has just made.
 */
export function gate<const T>(result: T): T {
  clean(result)
  return result
}
