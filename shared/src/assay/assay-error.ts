/** Stable reasons why the engine refuses; the sentence is for a technician. */
export type AssayErrorCode =
  | 'too-few-points'
  | 'too-few-values'
  | 'all-concentrations-equal'
  | 'no-spread'
  | 'non-finite'
  | 'negative-concentration'
  | 'invalid-weight'
  | 'slope-not-significant'
  | 'mixed-lengths'
  | 'invalid-probability'
  | 'invalid-argument'
  | 'no-root-in-range'
  | 'numerical-overflow'
  | 'unknown-unit'
  | 'invalid-time'
  | 'time-order'

/**
 * Thrown by every function of the engine for input it cannot answer honestly.
 * `index` is the position of the offending entry where there is one (0-based).
 */
export class AssayError extends Error {
  readonly code: AssayErrorCode
  readonly index: number | undefined

  constructor(code: AssayErrorCode, message: string, index?: number) {
    super(message)
    this.name = 'AssayError'
    this.code = code
    this.index = index
  }
}
