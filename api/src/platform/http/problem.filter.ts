import { Catch, HttpException, Logger, type ArgumentsHost, type ExceptionFilter } from '@nestjs/common'
import { AssayError } from '@weirlight/shared/assay'
import type { ProblemCode } from '@weirlight/shared/errors'
import { MoveRefused } from '@weirlight/shared/states'
import type { FastifyReply, FastifyRequest } from 'fastify'
import { problemOfPostgres } from '../database/postgres-errors.js'
import { ProblemError, invalidInput, toProblem } from './problem.js'

/** Everything that goes wrong leaves as a problem document; what nobody foresaw is masked. */
@Catch()
export class ProblemFilter implements ExceptionFilter {
  private readonly logger = new Logger(ProblemFilter.name)

  catch(error: unknown, host: ArgumentsHost): void {
    const http = host.switchToHttp()
    const request = http.getRequest<FastifyRequest>()
    const reply = http.getResponse<FastifyReply>()
    const problem = problemOf(error)
    const requestId = String(request.id)
    if (problem.status >= 500) this.logger.error({ err: error, requestId }, problem.detail)
    if (reply.sent) return
    if (problem.retryAfterSeconds !== undefined)
      void reply.header('retry-after', String(problem.retryAfterSeconds))
    void reply
      .status(problem.status)
      .header('content-type', 'application/problem+json; charset=utf-8')
      .header('cache-control', 'no-store')
      .send(JSON.stringify(toProblem(problem, requestId)))
  }
}

export function problemOf(error: unknown): ProblemError {
  if (error instanceof ProblemError) return error
  if (error instanceof MoveRefused) return new ProblemError(error.code, error.message, { cause: error })
  if (error instanceof AssayError) {
    const path = error.index === undefined ? '' : String(error.index)
    return invalidInput([{ path, message: error.message }])
  }
  if (error instanceof HttpException) return problemOfHttp(error.getStatus(), error)
  const fromPostgres = problemOfPostgres(error)
  if (fromPostgres) return fromPostgres
  const status = statusOf(error)
  if (status !== undefined && status < 500) return problemOfHttp(status, error)
  return new ProblemError(
    'internal',
    'Something went wrong on our side. Nothing was changed. Give the request id to the administrator.',
    {
      cause: error,
    },
  )
}

function statusOf(error: unknown): number | undefined {
  if (typeof error !== 'object' || error === null || !('statusCode' in error)) return undefined
  return typeof error.statusCode === 'number' ? error.statusCode : undefined
}

const BY_STATUS: Record<number, [ProblemCode, string]> = {
  400: ['invalid-input', 'The request could not be read.'],
  401: ['signed-out', 'Please sign in.'],
  403: ['forbidden', 'This is not allowed.'],
  404: ['not-found', 'There is nothing at this address.'],
  405: ['not-found', 'There is nothing at this address.'],
  406: ['upload-unreadable', 'Send the file as a form upload (multipart/form-data).'],
  413: ['upload-too-large', 'What was sent is too large.'],
  415: ['invalid-input', 'Send JSON (application/json).'],
  429: ['throttled', 'Too many requests. Wait a moment and try again.'],
}

function problemOfHttp(status: number, cause: unknown): ProblemError {
  const [code, detail] =
    BY_STATUS[status] ??
    (status < 500
      ? ['invalid-input', 'The request could not be read.']
      : ['internal', 'Something went wrong on our side.'])
  return new ProblemError(code as ProblemCode, detail as string, { cause })
}
