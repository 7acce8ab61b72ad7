import { forgotPassphrase, getSession, listUsers, signIn, signOut } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { aPersonWithPassphrase, PASSPHRASE } from '../../testing/accounts.js'
import { useTestApp, type TestApp } from '../../testing/test-app.js'
import { Agent } from '../../testing/agent.js'
import { SignInThrottle } from '../../platform/index.js'
import { UsersModule } from './users.module.js'

const at = useTestApp({ imports: [UsersModule] })

async function post(app: TestApp, body: unknown, cookie?: string) {
  const sent = await new Agent(app.app, cookie).send(signIn, { body })
  const set = sent.headers['set-cookie']
  const text = Array.isArray(set) ? String(set[0]) : typeof set === 'string' ? set : ''
  return { ...sent, cookieLine: text, cookie: text.split(';', 1)[0] ?? '' }
}

describe('signing in', () => {
  it('opens a session with a strict cookie, says who it is and writes it down', async () => {
    const person = await aPersonWithPassphrase(at())
    const sent = await post(at(), { email: ` ${person.email.toUpperCase()} `, password: PASSPHRASE })
    expect(sent.status).toBe(200)
    expect(sent.cookieLine).toMatch(/HttpOnly/i)
    expect(sent.cookieLine).toMatch(/SameSite=Strict/i)
    expect(sent.json).toMatchObject({
      userId: person.userId,
      role: 'technician',
      timeZone: 'UTC',
      idleMinutes: 30,
    })

    const { session } = await new Agent(at().app, sent.cookie).call(getSession, {})
    expect(session?.email).toBe(person.email)
    const { rows } = await at().database.owner.pool.query(
      `select actor_name, operation from history where action = 'session.sign-in' and thing_id = $1`,
      [person.userId],
    )
    expect(rows).toEqual([{ actor_name: person.name, operation: 'update' }])
  })

  it('gives a new session id at every sign-in, and the old one is worth nothing', async () => {
    const person = await aPersonWithPassphrase(at())
    const first = await post(at(), { email: person.email, password: PASSPHRASE })
    const second = await post(at(), { email: person.email, password: PASSPHRASE }, first.cookie)
    expect(second.cookie).not.toBe(first.cookie)
    expect((await new Agent(at().app, first.cookie).call(getSession, {})).session).toBeNull()
  })

  it('signs out', async () => {
    const person = await aPersonWithPassphrase(at(), { role: 'administrator' })
    const { cookie } = await post(at(), { email: person.email, password: PASSPHRASE })
    const agent = new Agent(at().app, cookie)
    await agent.call(listUsers, {})
    await agent.call(signOut, {})
    expect((await agent.refused(listUsers, {})).code).toBe('signed-out')
  })

  it('answers an unknown address, an invited, a disabled account and a wrong passphrase alike', async () => {
    const { db } = at().database
    const active = await aPersonWithPassphrase(at())
    const invited = await aPersonWithPassphrase(at())
    const disabled = await aPersonWithPassphrase(at())
    for (const [person, status] of [
      [invited, 'invited'],
      [disabled, 'disabled'],
    ] as const) {
      await db.transaction(person, 'user.disable', 'test', (trx) =>
        trx.updateTable('users').set({ status }).where('id', '=', person.userId).execute(),
      )
    }
    const answers = []
    for (const body of [
      { email: 'nobody@people.example', password: PASSPHRASE },
      { email: invited.email, password: PASSPHRASE },
      { email: disabled.email, password: PASSPHRASE },
      { email: active.email, password: 'not this passphrase' },
    ]) {
      const { status, json } = await post(at(), body)
      const { requestId: _, ...rest } = json as Record<string, unknown>
      answers.push({ status, ...rest })
    }
    expect(new Set(answers.map((answer) => JSON.stringify(answer))).size).toBe(1)
    expect(answers[0]).toMatchObject({ status: 403, code: 'wrong-passphrase' })
  })

  it('names every bad field before anything is looked up', async () => {
    const { status, json } = await post(at(), { email: 'not an address', password: '' })
    expect(status).toBe(422)
    expect((json as { errors: { path: string }[] }).errors.map(({ path }) => path)).toEqual([
      'email',
      'password',
    ])
  })
})

describe('guessing', () => {
  it('is slowed down after five wrong tries, also when they come at once, and only from that address', async () => {
    const person = await aPersonWithPassphrase(at())
    const tries = await Promise.all(
      Array.from({ length: 12 }, (_, i) =>
        post(at(), { email: person.email, password: `a wrong one, number ${i}` }),
      ),
    )
    const statuses = tries.map(({ status }) => status)
    expect(statuses.filter((status) => status === 403)).toHaveLength(5)
    expect(statuses.filter((status) => status === 429)).toHaveLength(7)
    const refused = await post(at(), { email: person.email, password: PASSPHRASE })
    expect(refused.status).toBe(429)
    expect(Number(refused.headers['retry-after'])).toBeGreaterThan(0)

    const elsewhere = await at().app.inject({
      method: 'POST',
      url: '/api/session',
      headers: { 'x-weirlight': '1' },
      remoteAddress: '192.0.2.44',
      payload: { email: person.email, password: PASSPHRASE },
    })
    expect(elsewhere.statusCode).toBe(200)
  })
})

describe('guessing from many addresses, or at many accounts', () => {
  const from = (remoteAddress: string, email: string, password: string) =>
    at().app.inject({
      method: 'POST',
      url: '/api/session',
      headers: { 'x-weirlight': '1' },
      remoteAddress,
      payload: { email, password },
    })

  it('holds up strangers, and not whoever signed in from their address before', async () => {
    const person = await aPersonWithPassphrase(at())
    expect((await from('192.0.2.9', person.email, PASSPHRASE)).statusCode).toBe(200)
    // tries that are begun and never succeed, without the time that hashing takes
    const throttle = at().get(SignInThrottle)
    for (let i = 0; i < 30; i += 1) await throttle.begin(person.email, `198.51.100.${i}`)
    expect((await from('203.0.113.5', person.email, PASSPHRASE)).statusCode).toBe(429)
    expect((await from('192.0.2.9', person.email, PASSPHRASE)).statusCode).toBe(200)

    for (let i = 0; i < 60; i += 1) await throttle.begin(`nobody-${i}@people.example`, '192.0.2.9')
    expect((await from('192.0.2.9', 'nobody-99@people.example', 'a wrong one')).statusCode).toBe(429)
    expect((await from('192.0.2.9', person.email, PASSPHRASE)).statusCode).toBe(200)
  })
})

describe('a forgotten passphrase', () => {
  it('answers alike whether the account exists or not, and mails only whoever has one', async () => {
    const person = await aPersonWithPassphrase(at())
    const agent = at().anonymous()
    await agent.call(forgotPassphrase, { body: { email: person.email } })
    await agent.call(forgotPassphrase, { body: { email: 'stranger@people.example' } })
    const { rows } = await at().database.owner.pool.query(
      `select recipient from mail_messages where key like 'reset:%' and recipient = any($1)`,
      [[person.email, 'stranger@people.example']],
    )
    expect(rows).toEqual([{ recipient: person.email }])
  })
})
