import type { Problem } from '@weirlight/shared/errors'
import { describe, expect, it } from 'vitest'
import { aUser } from '../../testing/people.js'
import { fail, file, good, save, useHttpTestApp, wrong } from './http.test-support.js'

const at = useHttpTestApp()

describe('a route', () => {
  it('answers by its contract and nothing more', async () => {
    const actor = await aUser(at().database.db)
    const agent = await at().as(actor)
    const sent = await agent.send(save, good)
    expect(sent.status).toBe(200)
    expect(sent.json).toEqual({ id: '7', name: 'A', actor: actor.name })
    expect(sent.headers).toMatchObject({ 'cache-control': 'no-store', 'x-content-type-options': 'nosniff' })
    expect(String(sent.headers['content-security-policy'])).toContain("script-src 'self'")
    expect(sent.headers['x-request-id']).toMatch(/^[0-9a-f-]{36}$/)
  })

  it('is refused without a session, and to a role that may not', async () => {
    expect(await at().anonymous().refused(save, good)).toMatchObject({ status: 401, code: 'signed-out' })
    const auditor = await at().as(await aUser(at().database.db, { role: 'auditor' }))
    expect(await auditor.refused(save, good)).toMatchObject({ status: 403, code: 'forbidden' })
  })

  it('without a contract is denied to everybody', async () => {
    const agent = await at().as(await aUser(at().database.db, { role: 'administrator' }))
    for (const method of ['GET', 'POST'] as const) {
      const sent = await agent.raw({ method, url: '/api/test/undeclared' })
      expect(sent.status).toBe(403)
      expect(sent.json).toMatchObject({ code: 'forbidden' })
    }
  })

  it('says all bad fields at once, with the paths of the form', async () => {
    const agent = await at().as(await aUser(at().database.db))
    const sent = await agent.send(save, {
      params: { id: 'x' },
      body: { name: '', standards: [{ volume: 1 }, { volume: 'a' }], extra: 1 },
    })
    expect(sent.status).toBe(422)
    expect(sent.headers['content-type']).toBe('application/problem+json; charset=utf-8')
    const problem = sent.json as Problem
    expect(problem).toMatchObject({
      type: 'https://weirlight.example/problems/invalid-input',
      code: 'invalid-input',
      status: 422,
      requestId: sent.headers['x-request-id'],
    })
    expect(problem.errors?.map(({ path }) => path).sort()).toEqual([
      'extra',
      'id',
      'name',
      'standards.1.volume',
    ])
    expect(problem.errors).toContainEqual({ path: 'name', message: 'Please fill this in.' })
    expect(problem.errors).toContainEqual({ path: 'standards.1.volume', message: 'Enter the volume.' })
  })

  it('whose answer breaks its contract fails in tests', async () => {
    expect(await at().anonymous().refused(wrong, {})).toMatchObject({ status: 500, code: 'internal' })
  })

  it('sends a file under its name', async () => {
    const sent = await at().anonymous().file(file, {})
    expect(sent.bytes.toString()).toBe('a,b\r\n')
    expect(sent.headers['content-type']).toBe('text/csv')
    expect(sent.headers['content-disposition']).toBe(
      `attachment; filename="S_dwerk _1_.csv"; filename*=UTF-8''S%C3%BCdwerk%20%221%22.csv`,
    )
  })
})

describe('problems', () => {
  const failing = (how: string) => at().anonymous().refused(fail, { body: { how } })

  it('mask what nobody foresaw', async () => {
    const problem = await failing('unknown')
    expect(problem).toMatchObject({ status: 500, code: 'internal' })
    expect(JSON.stringify(problem)).not.toContain('hunter2')
    expect(problem.requestId).toMatch(/^[0-9a-f-]{36}$/)
  })

  it('carry the sentence of the engine, of a state and of a unique key', async () => {
    expect(await failing('assay')).toMatchObject({
      status: 422,
      code: 'invalid-input',
      errors: [{ path: '3', message: 'A concentration is below zero.' }],
    })
    expect(await failing('move')).toMatchObject({ status: 403, code: 'own-work' })
    expect(await failing('unique')).toMatchObject({ status: 409, code: 'already-exists' })
  })

  it('are sent for addresses, bodies and methods that do not exist', async () => {
    const agent = at().anonymous()
    const raw = async (options: Parameters<typeof agent.raw>[0]) => (await agent.raw(options)).json
    expect(await raw({ method: 'GET', url: '/api/nothing' })).toMatchObject({
      status: 404,
      code: 'not-found',
    })
    expect(await raw({ method: 'DELETE', url: '/api/test/wrong' })).toMatchObject({ status: 404 })
    const json = { 'content-type': 'application/json' }
    expect(
      await raw({ method: 'POST', url: '/api/test/fail', payload: '{"how":', headers: json }),
    ).toMatchObject({
      status: 422,
      code: 'invalid-input',
    })
    const large = JSON.stringify({ how: 'x'.repeat(1_100_000) })
    expect(await raw({ method: 'POST', url: '/api/test/fail', payload: large, headers: json })).toMatchObject(
      { status: 413 },
    )
    const text = { 'content-type': 'text/html' }
    expect(await raw({ method: 'POST', url: '/api/test/fail', payload: 'x', headers: text })).toMatchObject({
      status: 422,
      code: 'invalid-input',
    })
  })
})

describe('requests of other sites', () => {
  const post = async (headers: Record<string, string>) => {
    const agent = await at().as(await aUser(at().database.db))
    const sent = await agent.raw({ method: 'POST', url: '/api/test/things/7', payload: good.body, headers })
    return { status: sent.status, code: (sent.json as Partial<Problem>).code }
  }

  it('are refused by any of three signs', async () => {
    const refused = { status: 403, code: 'cross-site' }
    expect(await post({ 'x-weirlight': '' })).toEqual(refused)
    expect(await post({ 'sec-fetch-site': 'cross-site' })).toEqual(refused)
    expect(await post({ 'sec-fetch-site': 'same-site' })).toEqual(refused)
    expect(await post({ origin: 'https://elsewhere.example' })).toEqual(refused)
    expect(await post({ origin: 'null' })).toEqual(refused)
    expect(await post({ origin: 'http://127.0.0.1:3000', 'sec-fetch-site': 'same-origin' })).toMatchObject({
      status: 200,
    })
  })
})
