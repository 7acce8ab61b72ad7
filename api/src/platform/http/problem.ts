import { PROBLEM_STATUS, type FieldProblem, type Problem, type ProblemCode } from '@weirlight/shared/errors'

export interface ProblemExtra {
  errors?: readonly FieldProblem[]
  conflict?: { changedBy: string; changedAt: string }
  retryAfterSeconds?: number
  cause?: unknown
}

/** A refusal the person is told about: a stable code and a sentence. */
export class ProblemError extends Error {
  readonly errors: readonly FieldProblem[] | undefined
  readonly conflict: { changedBy: string; changedAt: string } | undefined
  readonly retryAfterSeconds: number | undefined

  constructor(
    readonly code: ProblemCode,
    readonly detail: string,
    extra: ProblemExtra = {},
  ) {
    super(detail, { cause: extra.cause })
    this.name = 'ProblemError'
    this.errors = extra.errors
    this.conflict = extra.conflict
    this.retryAfterSeconds = extra.retryAfterSeconds
  }

  get status(): number {
    return PROBLEM_STATUS[this.code]
  }
}

/** `notFound('batch')`: also what another client's row is. */
export function notFound(thing: string): ProblemError {
  return new ProblemError('not-found', `There is no such ${thing}, or it is not yours to see.`)
}

export function notAllowedNow(sentence: string): ProblemError {
  return new ProblemError('not-allowed-now', sentence)
}

/** Bad fields that only the server can know of; paths as the form names them (`standards.2.volume`). */
export function invalidInput(errors: readonly FieldProblem[]): ProblemError {
  const [first] = errors
  const detail = errors.length === 1 && first ? first.message : `${errors.length} entries need another look.`
  return new ProblemError('invalid-input', detail, { errors })
}

export const PROBLEM_TITLES: Record<ProblemCode, string> = {
  'invalid-input': 'Some entries need another look',
  'signed-out': 'Please sign in',
  forbidden: 'Not allowed',
  'not-found': 'Not found',
  stale: 'Changed by somebody else',
  'not-allowed-now': 'Not possible now',
  'own-work': 'Your own work',
  'wrong-passphrase': 'Wrong passphrase',
  'second-factor-needed': 'A code is needed',
  'wrong-code': 'Wrong code',
  throttled: 'Too many tries',
  'already-exists': 'Already there',
  'upload-too-large': 'File too large',
  'upload-unreadable': 'File cannot be read',
  'cross-site': 'Request from another site',
  unavailable: 'Not available at the moment',
  internal: 'Something went wrong',
}

export function toProblem(error: ProblemError, requestId: string): Problem {
  return {
    type: `https://weirlight.example/problems/${error.code}`,
    title: PROBLEM_TITLES[error.code],
    status: error.status,
    code: error.code,
    detail: error.detail,
    requestId,
    ...(error.errors ? { errors: [...error.errors] } : {}),
    ...(error.conflict ? { conflict: error.conflict } : {}),
  }
}
