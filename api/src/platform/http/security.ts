import helmet from '@fastify/helmet'
import multipart from '@fastify/multipart'
import rateLimit from '@fastify/rate-limit'
import { LIMITS } from '@weirlight/shared/limits'
import type { FastifyInstance } from 'fastify'
import type { SettingsValues } from '../config/settings.js'
import { ProblemError } from './problem.js'

/**
 * Everything from this address alone. Style elements written at run time carry the page's nonce; style
 * attributes (chart tooltips) are let through, which can colour but not run anything.
 */
export function contentSecurityPolicy(nonce?: string): string {
  return [
    "default-src 'self'",
    "script-src 'self'",
    "script-src-attr 'none'",
    `style-src 'self' ${nonce ? `'nonce-${nonce}'` : "'unsafe-inline'"}`,
    "style-src-attr 'unsafe-inline'",
    "img-src 'self' data: blob:",
    "font-src 'self'",
    "connect-src 'self'",
    "object-src 'none'",
    "base-uri 'self'",
    "form-action 'self'",
    "frame-ancestors 'none'",
  ].join('; ')
}

/** A PDF is shown inside the page it belongs to; nothing in it runs, and nobody else may frame it. */
const DOCUMENT_POLICY =
  "default-src 'none'; style-src 'unsafe-inline'; object-src 'self'; frame-ancestors 'self'"
const DOCUMENT = /^\/api\/[^?]+\.pdf(\?|$)/

export async function registerSecurity(fastify: FastifyInstance, settings: SettingsValues): Promise<void> {
  await fastify.register(helmet, {
    contentSecurityPolicy: false,
    crossOriginEmbedderPolicy: false,
    referrerPolicy: { policy: 'same-origin' },
    strictTransportSecurity: settings.isSecure,
  })
  fastify.addHook('onRequest', (request, reply, done) => {
    const policy = DOCUMENT.test(request.url) ? DOCUMENT_POLICY : contentSecurityPolicy()
    void reply.header('content-security-policy', policy)
    void reply.header('permissions-policy', 'camera=(self), microphone=(), geolocation=()')
    void reply.header('x-request-id', String(request.id))
    if (request.url.startsWith('/api')) void reply.header('cache-control', 'no-store')
    done()
  })
  if (settings.rateLimit > 0) {
    // a valve for one process; sign-in has its own throttle in the database
    await fastify.register(rateLimit, {
      max: settings.rateLimit,
      timeWindow: 60_000,
      errorResponseBuilder: (_, context) =>
        new ProblemError('throttled', 'Too many requests. Wait a moment and try again.', {
          retryAfterSeconds: Math.ceil(context.ttl / 1000),
        }),
    })
  }
  await fastify.register(multipart, {
    throwFileSizeLimit: false,
    limits: {
      files: 1,
      fields: 10,
      fieldSize: 10_000,
      fieldNameSize: 100,
      headerPairs: 50,
      fileSize: LIMITS.uploadBytes + 1,
    },
  })
}
