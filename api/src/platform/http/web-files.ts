import { randomBytes } from 'node:crypto'
import { existsSync, readFileSync } from 'node:fs'
import { join, resolve } from 'node:path'
import fastifyStatic from '@fastify/static'
import type { FastifyInstance } from 'fastify'
import { contentSecurityPolicy } from './security.js'

const NONCE = '__CSP_NONCE__'

/** Serves the built web page: hashed files for a year, the page itself for any address that is not the API's. */
export async function registerWebFiles(fastify: FastifyInstance, webDist: string): Promise<void> {
  const root = resolve(webDist)
  const page = join(root, 'index.html')
  if (!existsSync(page)) throw new Error(`WEB_DIST: there is no index.html in ${root}.`)
  const html = readFileSync(page, 'utf8')
  await fastify.register(fastifyStatic, {
    root,
    wildcard: false,
    index: false,
    globIgnore: ['index.html*'],
    // the build writes .br and .gz beside each file
    preCompressed: true,
    cacheControl: false,
    setHeaders: (reply, path) => {
      const isHashed = path.includes('/assets/')
      reply.setHeader('cache-control', isHashed ? 'public, max-age=31536000, immutable' : 'no-cache')
    },
  })
  fastify.get('/*', (request, reply) => {
    const path = request.url.split('?', 1)[0] ?? '/'
    // a missing file or API address is an error, not the page
    if (path.startsWith('/api/') || path === '/api' || path.startsWith('/assets/'))
      return reply.callNotFound()
    const nonce = randomBytes(16).toString('base64')
    return reply
      .header('content-security-policy', contentSecurityPolicy(html.includes(NONCE) ? nonce : undefined))
      .header('cache-control', 'no-store')
      .type('text/html; charset=utf-8')
      .send(html.replaceAll(NONCE, nonce))
  })
}
