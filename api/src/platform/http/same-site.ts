import type { FastifyRequest } from 'fastify'
import { ProblemError } from './problem.js'

const SAFE = new Set(['GET', 'HEAD', 'OPTIONS'])

/**
 * Against forged requests from other sites, three independent signs: a header that a plain form cannot send
 * and another origin's script may not; what the browser says of the sender's site; and the Origin header.
 */
export function assertSameSite(request: FastifyRequest, publicUrl: string): void {
  if (SAFE.has(request.method)) return
  if (request.headers['x-weirlight'] !== '1') throw refusal('The header x-weirlight: 1 is missing.')
  const site = request.headers['sec-fetch-site']
  if (site !== undefined && site !== 'same-origin' && site !== 'none')
    throw refusal('It came from another site.')
  const { origin } = request.headers
  if (origin !== undefined && !isOwnOrigin(origin, publicUrl, request.host)) {
    throw refusal('It came from another site.')
  }
}

function isOwnOrigin(origin: string, publicUrl: string, host: string): boolean {
  if (!URL.canParse(origin)) return false
  const sent = new URL(origin)
  return sent.origin === new URL(publicUrl).origin || sent.host === host
}

function refusal(why: string): ProblemError {
  return new ProblemError('cross-site', `The request was refused. ${why}`)
}
