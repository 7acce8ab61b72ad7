import type { FastifyInstance, FastifyRequest } from 'fastify'
import { withRequestContext } from './request-context.js'

/** Twice: reading the body loses the context that was set before it. */
export function registerRequestContext(fastify: FastifyInstance): void {
  const hook = (request: FastifyRequest, _: unknown, done: () => void) => {
    withRequestContext({ requestId: String(request.id) }, done)
  }
  fastify.addHook('onRequest', hook)
  fastify.addHook('preValidation', hook)
}
