import { randomBytes } from 'node:crypto'
import { Signer } from '@fastify/cookie'
import type { NestFastifyApplication } from '@nestjs/platform-fastify'
import type { BodyInput, Endpoint, ParamsInput, QueryInput, ResponseOf } from '@weirlight/shared/contracts'
import type { Problem } from '@weirlight/shared/errors'
import type { SettingsValues } from '../platform/config/settings.js'
import type { TestDatabase } from './test-database.js'

type Part<K extends string, T> = [T] extends [undefined] ? unknown : { [key in K]: T }
export type CallInput<E> = Part<'params', ParamsInput<E>> &
  Part<'query', QueryInput<E>> &
  Part<'body', BodyInput<E>>

interface Parts {
  params?: Record<string, string>
  query?: Record<string, unknown>
  body?: unknown
}

export interface Sent {
  status: number
  headers: Record<string, unknown>
  bytes: Buffer
  json: unknown
}

/** Calls endpoints by their contracts, as one person's browser would. */
export class Agent {
  constructor(
    private readonly app: NestFastifyApplication,
    readonly cookie?: string,
  ) {}

  /** The answer of a call that must succeed. */
  async call<E extends Endpoint>(contract: E, input: CallInput<E>): Promise<ResponseOf<E>> {
    const sent = await this.send(contract, input as Parts)
    if (sent.status >= 300) {
      throw new Error(`${contract.name} answered ${sent.status}: ${JSON.stringify(sent.json)}`)
    }
    return sent.json as ResponseOf<E>
  }

  /** The problem of a call that must be refused. */
  async refused<E extends Endpoint>(contract: E, input: CallInput<E>): Promise<Problem> {
    const sent = await this.send(contract, input as Parts)
    if (sent.status < 400) throw new Error(`${contract.name} was not refused but answered ${sent.status}.`)
    return sent.json as Problem
  }

  /** The bytes of a file endpoint. */
  async file<E extends Endpoint>(contract: E, input: CallInput<E>): Promise<Sent> {
    const sent = await this.send(contract, input as Parts)
    if (sent.status !== 200)
      throw new Error(`${contract.name} answered ${sent.status}: ${sent.bytes.toString()}`)
    return sent
  }

  /** Sends a file to an endpoint with `upload: true`. */
  async upload<E extends Endpoint>(
    contract: E,
    input: CallInput<E> & { file: { filename: string; content: Buffer; type?: string } },
  ): Promise<Sent> {
    const boundary = `----weirlight${randomBytes(8).toString('hex')}`
    const { filename, content, type = 'application/octet-stream' } = input.file
    const head = `--${boundary}\r\nContent-Disposition: form-data; name="file"; filename="${filename}"\r\nContent-Type: ${type}\r\n\r\n`
    const payload = Buffer.concat([Buffer.from(head), content, Buffer.from(`\r\n--${boundary}--\r\n`)])
    return this.raw({
      method: contract.method,
      url: urlOf(contract, input as Parts),
      payload,
      headers: { 'content-type': `multipart/form-data; boundary=${boundary}` },
    })
  }

  /** Whatever comes back, unjudged. */
  async send(contract: Endpoint, input: Parts): Promise<Sent> {
    return this.raw({
      method: contract.method,
      url: urlOf(contract, input),
      ...(input.body === undefined ? {} : { payload: input.body as object }),
    })
  }

  async raw(options: {
    method: Endpoint['method']
    url: string
    payload?: object | string | Buffer
    headers?: Record<string, string>
  }): Promise<Sent> {
    const response = await this.app.inject({
      ...options,
      headers: { 'x-weirlight': '1', ...(this.cookie ? { cookie: this.cookie } : {}), ...options.headers },
    })
    const isJson = /json/.test(String(response.headers['content-type'] ?? ''))
    return {
      status: response.statusCode,
      headers: response.headers,
      bytes: response.rawPayload,
      json: isJson ? (JSON.parse(response.payload) as unknown) : undefined,
    }
  }
}

function urlOf(contract: Endpoint, { params = {}, query = {} }: Parts): string {
  const path = contract.path.replaceAll(/:(\w+)/g, (_, name: string) =>
    encodeURIComponent(params[name] ?? ''),
  )
  const search = new URLSearchParams()
  for (const [key, value] of Object.entries(query)) {
    if (value !== undefined && value !== null) search.append(key, String(value))
  }
  const text = search.toString()
  return `/api${path}${text === '' ? '' : `?${text}`}`
}

export async function sessionCookie({
  database,
  settings,
  userId,
}: {
  database: TestDatabase
  settings: SettingsValues
  userId: string
}): Promise<string> {
  const sid = randomBytes(24).toString('base64url')
  const now = database.clock.now().getTime()
  const expires = new Date(now + 30 * 60_000).toISOString()
  const cookie = {
    originalMaxAge: 30 * 60_000,
    expires,
    httpOnly: true,
    path: '/',
    sameSite: 'strict',
    secure: false,
  }
  const sess = { cookie, userId, signedInAt: now, seenAt: now }
  await database.db.unwatched((trx) =>
    trx
      .insertInto('sessions')
      .values({ sid, sess: JSON.stringify(sess), expire: expires })
      .execute(),
  )
  const signed = new Signer(settings.sessionSecret, 'sha256').sign(sid)
  return `weirlight=${encodeURIComponent(signed)}`
}
