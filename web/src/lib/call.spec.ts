import { defineEndpoint } from '@weirlight/shared/contracts'
import { AxiosError, type AxiosAdapter, type InternalAxiosRequestConfig } from 'axios'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { call, hrefFor } from './call'
import { http } from './http'
import { gaveUpSignIn, isSignInNeeded, signedInAgain } from './re-sign-in'

const listThings = defineEndpoint({
  name: 'listThings',
  summary: '',
  method: 'GET',
  path: '/things/:id/parts',
  permission: 'samples.read',
  params: z.object({ id: z.string() }),
  query: z.object({ state: z.string().optional(), limit: z.coerce.number().default(50) }),
  response: z.object({ ok: z.boolean() }),
})

const seen: InternalAxiosRequestConfig[] = []
let answers: { status: number; body: unknown }[] = []
const adapter: AxiosAdapter = async (config) => {
  seen.push(config)
  const answer = answers.shift() ?? { status: 200, body: { ok: true } }
  const response = {
    status: answer.status,
    statusText: '',
    data: answer.body,
    headers: { date: 'Tue, 01 Dec 2026 14:05:00 GMT' },
    config,
  }
  if (answer.status < 400) return response
  throw new AxiosError('refused', undefined, config, null, response)
}
const original = http.defaults.adapter

beforeEach(() => {
  seen.length = 0
  answers = []
  http.defaults.adapter = adapter
})
afterEach(() => {
  if (original) http.defaults.adapter = original
})

describe('call', () => {
  it('fills the path, drops empty filters and carries the header that no other site can send', async () => {
    await call(listThings, { params: { id: 'a/b' }, query: { state: '', limit: 20 } })
    expect(seen[0]?.url).toBe('/things/a%2Fb/parts')
    expect(seen[0]?.params).toEqual({ limit: 20 })
    expect(seen[0]?.headers.get('x-weirlight')).toBe('1')
  })

  it('waits for a new sign-in when the session is over, then sends the same again', async () => {
    answers = [{ status: 401, body: { code: 'signed-out', detail: 'Please sign in.' } }]
    const answer = call(listThings, { params: { id: '1' } })
    await expect.poll(isSignInNeeded).toBe(true)
    expect(seen).toHaveLength(1)
    signedInAgain()
    await expect(answer).resolves.toEqual({ ok: true })
    expect(seen.map((each) => each.url)).toEqual(['/things/1/parts', '/things/1/parts'])
    expect(isSignInNeeded()).toBe(false)
  })

  it('reports the end of the session when the person would rather leave', async () => {
    answers = [{ status: 401, body: null }]
    const answer = call(listThings, { params: { id: '1' } })
    await expect.poll(isSignInNeeded).toBe(true)
    gaveUpSignIn()
    await expect(answer).rejects.toMatchObject({ code: 'signed-out' })
  })

  it('turns no answer into a sentence', async () => {
    http.defaults.adapter = async (config) => {
      throw new AxiosError('Network Error', 'ERR_NETWORK', config)
    }
    await expect(call(listThings, { params: { id: '1' } })).rejects.toMatchObject({ code: 'offline' })
  })
})

describe('hrefFor', () => {
  it('gives the address of a file with its filters', () => {
    expect(hrefFor(listThings, { params: { id: '7' }, query: { state: 'open' } })).toBe(
      '/api/things/7/parts?state=open',
    )
  })
})
