import {
  Injectable,
  Logger,
  type CallHandler,
  type ExecutionContext,
  type NestInterceptor,
} from '@nestjs/common'
import { Reflector } from '@nestjs/core'
import type { Endpoint as Contract } from '@weirlight/shared/contracts'
import type { FieldProblem } from '@weirlight/shared/errors'
import type { FastifyRequest } from 'fastify'
import { map, type Observable } from 'rxjs'
import type { z } from 'zod'
import { Settings } from '../config/settings.js'
import { CONTRACT } from './endpoint.decorator.js'
import { toStreamable, type FileAnswer } from './file-answer.js'
import { toFieldProblems } from './issues.js'
import { invalidInput } from './problem.js'
import { readUpload } from './upload.js'

/** Holds both sides of a request to the contract: input before the handler, the answer after it. */
@Injectable()
export class EndpointInterceptor implements NestInterceptor {
  private readonly logger = new Logger(EndpointInterceptor.name)

  constructor(
    private readonly reflector: Reflector,
    private readonly settings: Settings,
  ) {}

  async intercept(context: ExecutionContext, next: CallHandler): Promise<Observable<unknown>> {
    const contract = this.reflector.get<Contract | undefined>(CONTRACT, context.getHandler())
    if (!contract) return next.handle()
    const request = context.switchToHttp().getRequest<FastifyRequest>()
    request.endpointInput = validateInput(contract, request)
    if (contract.upload) request.uploadedFile = await readUpload(request)
    return next.handle().pipe(map((answer) => this.answer(contract, answer)))
  }

  private answer(contract: Contract, answer: unknown): unknown {
    if (contract.file) return toStreamable(answer as FileAnswer)
    if (!contract.response) return undefined
    const parsed = contract.response.safeParse(answer)
    if (parsed.success) return parsed.data
    const problems = toFieldProblems(parsed.error.issues)
      .slice(0, 10)
      .map(({ path, message }) => `${path}: ${message}`)
    const text = `${contract.name} does not answer as its contract says: ${problems.join('; ')}`
    if (!this.settings.isProduction) throw new Error(text)
    this.logger.error(text)
    return answer
  }
}

function validateInput(contract: Contract, request: FastifyRequest) {
  const errors: FieldProblem[] = []
  const check = (schema: z.ZodType | undefined, value: unknown) => {
    if (!schema) return undefined
    const parsed = schema.safeParse(value ?? {})
    if (parsed.success) return parsed.data
    errors.push(...toFieldProblems(parsed.error.issues))
    return undefined
  }
  const input = {
    params: check(contract.params, request.params),
    query: check(contract.query, request.query),
    body: check(contract.body, request.body),
  }
  if (errors.length > 0) throw invalidInput(errors)
  return input
}
