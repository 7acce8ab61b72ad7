import { getSecondFactor, signIn } from '@weirlight/shared/contracts'
import { beforeEach, describe, expect, it } from 'vitest'
import { aPersonWithPassphrase } from '../../testing/accounts.js'
import { Agent } from '../../testing/agent.js'
import { useTestApp } from '../../testing/test-app.js'
import {
  aPersonWithSecondFactor,
  codeOf,
  oneGetsIn,
  problemOf,
  refusalOf,
  standStill,
  stepOn,
  trySignIn,
} from './second-factor.test-support.js'
import { UsersModule } from './users.module.js'

const at = useTestApp({ imports: [UsersModule] })

beforeEach(() => standStill(at()))

describe('signing in with a second factor', () => {
  it('asks for the code after the right passphrase alone, as often as that is given', async () => {
    const person = await aPersonWithSecondFactor(at())
    for (let i = 0; i < 7; i += 1)
      expect(problemOf(await trySignIn(at(), person.email)).code).toBe('second-factor-needed')
    const body = {
      email: person.email,
      password: 'not this passphrase',
      code: codeOf(at(), person.secret, 1),
    }
    const wrong = await new Agent(at().app).refused(signIn, { body })
    const stranger = await new Agent(at().app).refused(signIn, {
      body: { ...body, email: 'nobody@people.example' },
    })
    expect(wrong.code).toBe('wrong-passphrase')
    expect({ ...stranger, requestId: '' }).toEqual({ ...wrong, requestId: '' })
    // the code beside a wrong passphrase was not looked at
    expect((await trySignIn(at(), person.email, body.code)).status).toBe(200)
  })

  it('takes each code once, also when it comes twice at the same moment', async () => {
    const person = await aPersonWithSecondFactor(at())
    expect(refusalOf(await trySignIn(at(), person.email, codeOf(at(), person.secret)))).toContain(
      'used already',
    )
    stepOn(at())
    const code = codeOf(at(), person.secret)
    const sent = await Promise.all([1, 2].map(() => trySignIn(at(), person.email, code)))
    expect(oneGetsIn(sent)).toContain('used already')
    expect(refusalOf(await trySignIn(at(), person.email, code))).toContain('used already')
  })

  it('allows for a clock that is one step wrong, and no more', async () => {
    const person = await aPersonWithSecondFactor(at())
    stepOn(at(), 10)
    for (const steps of [-2, 2])
      expect(refusalOf(await trySignIn(at(), person.email, codeOf(at(), person.secret, steps)))).toContain(
        'not the code',
      )
    expect((await trySignIn(at(), person.email, codeOf(at(), person.secret, -1))).status).toBe(200)
    expect((await trySignIn(at(), person.email, codeOf(at(), person.secret, 1))).status).toBe(200)
    // older than the last one used
    expect(refusalOf(await trySignIn(at(), person.email, codeOf(at(), person.secret)))).toContain(
      'used already',
    )
  })

  it('takes a recovery code once, of its owner, however it is typed, and writes that down', async () => {
    const person = await aPersonWithSecondFactor(at())
    const other = await aPersonWithSecondFactor(at())
    const [code = '', second = ''] = person.recoveryCodes
    refusalOf(await trySignIn(at(), other.email, code))
    const typed = ` ${code.toLowerCase().replaceAll('-', ' ')} `
    const sent = await Promise.all([1, 2].map(() => trySignIn(at(), person.email, typed)))
    oneGetsIn(sent)
    expect((await person.agent.call(getSecondFactor, {})).recoveryCodesLeft).toBe(9)
    expect((await trySignIn(at(), person.email, second)).status).toBe(200)
    const { rows } = await at().database.owner.pool.query<{ reason: string }>(
      `select reason from history where action = 'session.sign-in' and thing_id = $1 order by id`,
      [person.userId],
    )
    expect(rows.map(({ reason }) => reason)).toEqual([
      'With a recovery code, 9 left',
      'With a recovery code, 8 left',
    ])
  })

  it('slows down whoever guesses codes behind a right passphrase', async () => {
    const person = await aPersonWithSecondFactor(at())
    stepOn(at(), 3)
    for (let i = 0; i < 5; i += 1) {
      await trySignIn(at(), person.email)
      refusalOf(await trySignIn(at(), person.email, codeOf(at(), person.secret, 50 + i)))
    }
    const right = await trySignIn(at(), person.email, codeOf(at(), person.secret))
    expect(right.status).toBe(429)
    expect((await trySignIn(at(), person.email)).status).toBe(429)
  })

  it('says what a code can look like before anything is looked up', async () => {
    const person = await aPersonWithSecondFactor(at())
    for (const code of ['', '12345', '1234567', 'ABCD-EFGH']) {
      const sent = await trySignIn(at(), person.email, code)
      expect(sent.status, code).toBe(422)
      expect(problemOf(sent).errors?.map(({ path }) => path)).toEqual(['code'])
    }
  })

  it('asks nobody for a code who has none', async () => {
    const person = await aPersonWithPassphrase(at())
    expect((await trySignIn(at(), person.email)).status).toBe(200)
  })
})
