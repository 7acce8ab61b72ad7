import type { FieldProblem, Problem, ProblemCode } from '@weirlight/shared/errors'

/** `offline`: no answer at all, so nothing is known about what the server did. */
export type FailureCode = ProblemCode | 'offline'

const OFFLINE_SENTENCE =
  'The laboratory’s server does not answer. What you entered is still here; try again in a moment.'
const UNKNOWN_SENTENCE = 'Something went wrong on the server. What you entered is still here.'

/** Every refusal or failure of a call, with the sentence for the person. */
export class ProblemError extends Error {
  readonly code: FailureCode
  readonly status: number
  readonly title: string
  readonly requestId: string | null
  readonly errors: readonly FieldProblem[]
  readonly conflict: Problem['conflict'] | null

  constructor(problem: {
    code: FailureCode
    status: number
    title: string
    detail: string
    requestId?: string | null
    errors?: readonly FieldProblem[]
    conflict?: Problem['conflict'] | null
  }) {
    super(problem.detail)
    this.name = 'ProblemError'
    this.code = problem.code
    this.status = problem.status
    this.title = problem.title
    this.requestId = problem.requestId ?? null
    this.errors = problem.errors ?? []
    this.conflict = problem.conflict ?? null
  }
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null
}

function fieldProblems(value: unknown): FieldProblem[] {
  if (!Array.isArray(value)) return []
  return value.filter(
    (each): each is FieldProblem =>
      isRecord(each) && typeof each['path'] === 'string' && typeof each['message'] === 'string',
  )
}

/** Reads a problem document; an answer that is none (a proxy's page, say) becomes a plain sentence. */
export function parseProblem(answer: { status: number; body: unknown }): ProblemError {
  const { status, body } = answer
  if (isRecord(body) && typeof body['code'] === 'string' && typeof body['detail'] === 'string') {
    const conflict = body['conflict']
    return new ProblemError({
      code: body['code'] as ProblemCode,
      status,
      title: typeof body['title'] === 'string' ? body['title'] : '',
      detail: body['detail'],
      requestId: typeof body['requestId'] === 'string' ? body['requestId'] : null,
      errors: fieldProblems(body['errors']),
      conflict:
        isRecord(conflict) &&
        typeof conflict['changedBy'] === 'string' &&
        typeof conflict['changedAt'] === 'string'
          ? { changedBy: conflict['changedBy'], changedAt: conflict['changedAt'] }
          : null,
    })
  }
  if (status === 502 || status === 503 || status === 504) return offlineProblem()
  if (status === 401)
    return new ProblemError({ code: 'signed-out', status, title: 'Signed out', detail: 'Please sign in.' })
  if (status === 413) {
    return new ProblemError({
      code: 'upload-too-large',
      status,
      title: 'Too large',
      detail: 'This file is too large.',
    })
  }
  return new ProblemError({ code: 'internal', status, title: 'Unexpected answer', detail: UNKNOWN_SENTENCE })
}

export function offlineProblem(): ProblemError {
  return new ProblemError({ code: 'offline', status: 0, title: 'No connection', detail: OFFLINE_SENTENCE })
}

/** Any thrown thing as a problem, so that a page has one kind of failure to show. */
export function asProblem(error: unknown): ProblemError {
  if (error instanceof ProblemError) return error
  return new ProblemError({
    code: 'internal',
    status: 0,
    title: 'Unexpected fault',
    detail: 'This page ran into a fault of its own. Nothing was sent.',
  })
}
