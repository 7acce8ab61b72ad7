import { Body, Controller, Get, Injectable, Module, Post } from '@nestjs/common'
import { AssayError } from '@weirlight/shared/assay'
import { defineEndpoint, id } from '@weirlight/shared/contracts'
import type { Problem } from '@weirlight/shared/errors'
import { LIMITS } from '@weirlight/shared/limits'
import { MoveRefused } from '@weirlight/shared/states'
import { sql } from 'kysely'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import type { Actor } from '@weirlight/shared/permissions'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { SYSTEM } from '../database/acting.js'
import { Database } from '../database/database.js'
import { CurrentActor, Endpoint, Input, Upload, type InputOf } from './endpoint.decorator.js'
import type { FileAnswer } from './file-answer.js'
import type { UploadedFile } from './upload.js'

const base = { summary: 'For the test', method: 'POST' } as const
const save = defineEndpoint({
  ...base,
  name: 'testSave',
  path: '/test/things/:id',
  permission: 'samples.receive',
  params: z.object({ id }),
  query: z.object({ dry: z.enum(['yes', 'no']).default('no') }),
  body: z.strictObject({
    name: z.string().min(1, 'Please fill this in.'),
    standards: z.array(z.object({ volume: z.number('Enter the volume.') })),
  }),
  response: z.object({ id: z.string(), name: z.string(), actor: z.string() }),
})
const fail = defineEndpoint({
  ...base,
  name: 'testFail',
  path: '/test/fail',
  permission: 'public',
  body: z.object({ how: z.string() }),
})
const wrong = defineEndpoint({
  ...base,
  method: 'GET',
  name: 'testWrong',
  path: '/test/wrong',
  permission: 'public',
  response: z.object({ count: z.number() }),
})
const upload = defineEndpoint({
  ...base,
  name: 'testUpload',
  path: '/test/upload',
  permission: 'signed-in',
  upload: true,
  response: z.object({ filename: z.string(), size: z.number(), sha256: z.string() }),
})
const file = defineEndpoint({
  ...base,
  method: 'GET',
  name: 'testFile',
  path: '/test/file',
  permission: 'public',
  file: ['text/csv'],
})

@Injectable()
class Failures {
  constructor(private readonly db: Database) {}

  async run(how: string): Promise<void> {
    if (how === 'assay') throw new AssayError('negative-concentration', 'A concentration is below zero.', 3)
    if (how === 'move')
      throw new MoveRefused('own-work', 'You prepared this batch; somebody else must sign it.')
    if (how === 'unique') {
      await this.db.transaction(SYSTEM, 'user.invite', null, async (trx) => {
        for (let n = 0; n < 2; n += 1) {
          await trx
            .insertInto('users')
            .values({ email: 'twice@people.example', name: 'T', role: 'auditor' })
            .execute()
        }
      })
    }
    throw new Error('a secret of the inside: password=hunter2')
  }
}

@Controller()
class TestController {
  constructor(private readonly failures: Failures) {}

  @Endpoint(save)
  save(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof save>) {
    return { id: params.id, name: body.name, actor: actor.name, secret: 'stripped' }
  }

  @Endpoint(fail)
  async fail(@Input() { body }: InputOf<typeof fail>) {
    await this.failures.run(body.how)
  }

  @Endpoint(wrong)
  wrong() {
    return { count: 'many' as unknown as number }
  }

  @Endpoint(upload)
  upload(@Upload() { filename, bytes, sha256 }: UploadedFile) {
    return { filename, size: bytes.length, sha256 }
  }

  @Endpoint(file)
  file(): FileAnswer {
    return { content: Buffer.from('a,b\r\n'), mediaType: 'text/csv', filename: 'Südwerk "1".csv' }
  }

  @Get('test/undeclared')
  undeclared() {
    return { secret: true }
  }

  @Post('test/undeclared')
  undeclaredPost(@Body() body: unknown) {
    return body
  }
}

@Module({ controllers: [TestController], providers: [Failures] })
class TestModule {}

// routes without a contract keep the application from starting; here one must get through to be refused
const at = useTestApp({ imports: [TestModule], allowUndeclaredRoutes: true })
const good = { params: { id: '7' }, query: {}, body: { name: 'A', standards: [{ volume: 1 }] } }

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

describe('an upload', () => {
  const send = async (content: Buffer, filename = 'C:\\bench\\a.csv') => {
    const agent = await at().as(await aUser(at().database.db))
    return agent.upload(upload, { file: { filename, content } })
  }

  it('arrives whole, with a clean name and its hash', async () => {
    const sent = await send(Buffer.from('abc'))
    expect(sent.json).toEqual({
      filename: 'a.csv',
      size: 3,
      // SHA-256 of "abc", FIPS 180-4
      sha256: 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad',
    })
  })

  it('of exactly the limit is taken; one byte more, fifty megabytes, or nothing are not', async () => {
    expect((await send(Buffer.alloc(LIMITS.uploadBytes, 'a'))).status).toBe(200)
    expect((await send(Buffer.alloc(LIMITS.uploadBytes + 1, 'a'))).json).toMatchObject({
      code: 'upload-too-large',
    })
    expect((await send(Buffer.alloc(50 * 1024 * 1024, 'a'))).json).toMatchObject({ code: 'upload-too-large' })
    expect((await send(Buffer.alloc(0))).json).toMatchObject({ code: 'upload-unreadable' })
  })

  it('that is no form is refused', async () => {
    const agent = await at().as(await aUser(at().database.db))
    const sent = await agent.raw({ method: 'POST', url: '/api/test/upload', payload: { a: 1 } })
    expect(sent.json).toMatchObject({ code: 'upload-unreadable' })
  })
})

describe('a session', () => {
  it('dies with the account, at once', async () => {
    const { db } = at().database
    const actor = await aUser(db)
    const agent = await at().as(actor)
    await agent.call(save, good)
    await db.transaction(SYSTEM, 'user.disable', 'left', (trx) =>
      trx.updateTable('users').set({ status: 'disabled' }).where('id', '=', actor.userId).execute(),
    )
    expect(await agent.refused(save, good)).toMatchObject({ code: 'signed-out' })
  })

  it('follows a changed role at once', async () => {
    const { db } = at().database
    const actor = await aUser(db)
    const agent = await at().as(actor)
    await db.transaction(SYSTEM, 'user.change', 'other work', (trx) =>
      trx.updateTable('users').set({ role: 'auditor' }).where('id', '=', actor.userId).execute(),
    )
    expect(await agent.refused(save, good)).toMatchObject({ code: 'forbidden' })
  })

  it.each([
    ['unused for half an hour', { seenAt: 30 }, 'signed-out'],
    ['used until a minute before', { seenAt: 29, signedInAt: 600 }, undefined],
    ['begun twelve hours ago', { seenAt: 1, signedInAt: 720 }, 'signed-out'],
  ])('%s: %o', async (_, minutesAgo, code) => {
    const { db } = at().database
    const actor = await aUser(db)
    const agent = await at().as(actor)
    const times = Object.entries(minutesAgo).map(([key, minutes]) => [key, Date.now() - minutes * 60_000])
    await db.unwatched(async (trx) => {
      const row = await trx
        .selectFrom('sessions')
        .selectAll()
        .where(sql<boolean>`sess ->> 'userId' = ${actor.userId}`)
        .executeTakeFirstOrThrow()
      const sess = { ...(row.sess as object), ...Object.fromEntries(times) }
      await trx
        .updateTable('sessions')
        .set({ sess: JSON.stringify(sess) })
        .where('sid', '=', row.sid)
        .execute()
    })
    const sent = await agent.send(save, good)
    expect((sent.json as Partial<Problem>).code).toBe(code)
  })

  it('with a cookie of somebody’s own making is nobody’s', async () => {
    const sent = await at()
      .anonymous()
      .raw({
        method: 'POST',
        url: '/api/test/things/7',
        payload: good.body,
        headers: { cookie: 'weirlight=abc.def' },
      })
    expect(sent.json).toMatchObject({ code: 'signed-out' })
    const rows = await at()
      .database.db.read.selectFrom('sessions')
      .select('sid')
      .where('sid', 'like', 'abc%')
      .execute()
    expect(rows).toEqual([])
  })
})
