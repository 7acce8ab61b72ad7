/** RFC 9457 problem details, as every refusal of the API is sent (`application/problem+json`). */
export interface Problem {
  type: string
  title: string
  status: number
  /** stable reason, for code */
  code: ProblemCode
  /** a sentence for the person */
  detail: string
  requestId: string
  /** every bad field at once; `path` as the form names it, e.g. `standards.2.readings.0` */
  errors?: FieldProblem[]
  /** for `stale`: who changed it and when */
  conflict?: { changedBy: string; changedAt: string }
}

export interface FieldProblem {
  path: string
  message: string
}

export type ProblemCode =
  | 'invalid-input'
  | 'signed-out'
  | 'forbidden'
  | 'not-found'
  | 'stale'
  | 'not-allowed-now'
  | 'own-work'
  | 'wrong-passphrase'
  | 'second-factor-needed'
  | 'wrong-code'
  | 'throttled'
  | 'already-exists'
  | 'upload-too-large'
  | 'upload-unreadable'
  | 'cross-site'
  | 'unavailable'
  | 'internal'

export const PROBLEM_STATUS: Record<ProblemCode, number> = {
  'invalid-input': 422,
  'signed-out': 401,
  forbidden: 403,
  'not-found': 404,
  stale: 409,
  'not-allowed-now': 409,
  'own-work': 403,
  'wrong-passphrase': 403,
  'second-factor-needed': 403,
  'wrong-code': 403,
  throttled: 429,
  'already-exists': 409,
  'upload-too-large': 413,
  'upload-unreadable': 422,
  'cross-site': 403,
  unavailable: 503,
  internal: 500,
}
