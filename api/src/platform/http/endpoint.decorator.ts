import {
  HttpCode,
  RequestMapping,
  RequestMethod,
  SetMetadata,
  applyDecorators,
  createParamDecorator,
  type ExecutionContext,
} from '@nestjs/common'
import type { BodyOf, Endpoint as Contract, HttpMethod, ParamsOf, QueryOf } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import type { FastifyRequest } from 'fastify'
import type { z } from 'zod'
import type { FileAnswer } from './file-answer.js'
import { ProblemError } from './problem.js'
import type { UploadedFile } from './upload.js'

export const CONTRACT = 'weirlight:contract'

/** What the handler of a contract gets. */
export interface InputOf<E> {
  params: ParamsOf<E>
  query: QueryOf<E>
  body: BodyOf<E>
}

/** What the handler of a contract must give back. */
export type AnswerOf<E> = E extends { response: infer R extends z.ZodType }
  ? z.input<R>
  : E extends { file: readonly string[] }
    ? FileAnswer
    : void

type Handler<E> = (...args: never[]) => Promise<AnswerOf<E>> | AnswerOf<E>

const METHODS: Record<HttpMethod, RequestMethod> = {
  GET: RequestMethod.GET,
  POST: RequestMethod.POST,
  PUT: RequestMethod.PUT,
  DELETE: RequestMethod.DELETE,
}

/**
 * The route of a contract: method, path, permission, input and output all come from it, and the compiler
 * refuses a handler that does not answer as the contract says.
 */
export function Endpoint<const E extends Contract>(contract: E) {
  const isEmpty = !contract.response && !contract.file
  const decorate = applyDecorators(
    SetMetadata(CONTRACT, contract),
    RequestMapping({ path: contract.path, method: METHODS[contract.method] }),
    HttpCode(isEmpty ? 204 : 200),
  )
  return <T extends Handler<E>>(
    target: object,
    key: string | symbol,
    descriptor: TypedPropertyDescriptor<T>,
  ): void => {
    decorate(target, key, descriptor)
  }
}

function requestOf(context: ExecutionContext): FastifyRequest {
  return context.switchToHttp().getRequest<FastifyRequest>()
}

/** `@Input() { params, query, body }: InputOf<typeof contract>`, already validated. */
export const Input = createParamDecorator(
  (_: unknown, context: ExecutionContext) => requestOf(context).endpointInput,
)

/** The person acting; the guard has made sure there is one. */
export const CurrentActor = createParamDecorator((_: unknown, context: ExecutionContext): Actor => {
  const { actor } = requestOf(context)
  if (!actor) throw new ProblemError('signed-out', 'Please sign in.')
  return actor
})

/** On public endpoints: the person if there is one. */
export const MaybeActor = createParamDecorator(
  (_: unknown, context: ExecutionContext): Actor | undefined => requestOf(context).actor,
)

/** The one uploaded file of an endpoint with `upload: true`, within the size limit. */
export const Upload = createParamDecorator((_: unknown, context: ExecutionContext): UploadedFile => {
  const { uploadedFile } = requestOf(context)
  if (!uploadedFile) throw new ProblemError('upload-unreadable', 'No file was sent.')
  return uploadedFile
})
