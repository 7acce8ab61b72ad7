import {
  getSecondFactor,
  listUsers,
  removeSecondFactor,
  takeOffSecondFactor,
} from '@weirlight/shared/contracts'
import { beforeEach, describe, expect, it } from 'vitest'
import { PASSPHRASE } from '../../testing/accounts.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { mailsTo, versionOf } from './accounts.test-support.js'
import {
  aPersonWithSecondFactor,
  codeOf,
  refusalOf,
  standStill,
  stepOn,
  trySignIn,
} from './second-factor.test-support.js'
import { UsersModule } from './users.module.js'

const at = useTestApp({ imports: [UsersModule] })

beforeEach(() => standStill(at()))

describe('taking it off', () => {
  it('wants passphrase and code of its owner, tells by mail, and the passphrase alone signs in', async () => {
    const person = await aPersonWithSecondFactor(at())
    stepOn(at())
    const code = codeOf(at(), person.secret)
    const refused = await person.agent.refused(removeSecondFactor, {
      body: { passphrase: 'not this passphrase', code },
    })
    expect(refused.code).toBe('wrong-passphrase')
    refusalOf(
      await person.agent.send(removeSecondFactor, {
        body: { passphrase: PASSPHRASE, code: codeOf(at(), person.secret, 40) },
      }),
    )
    await person.agent.call(removeSecondFactor, { body: { passphrase: PASSPHRASE, code } })
    expect((await person.agent.call(getSecondFactor, {})).since).toBeNull()
    expect(await mailsTo(at(), person.email)).toContainEqual(
      expect.stringContaining('has no second factor any more'),
    )
    expect((await trySignIn(at(), person.email)).status).toBe(200)
    // what it was opens nothing
    const again = await person.agent.refused(removeSecondFactor, { body: { passphrase: PASSPHRASE, code } })
    expect(again.code).toBe('not-allowed-now')
  })

  it('is slowed down after five wrong codes: the right passphrase beside them clears none', async () => {
    const person = await aPersonWithSecondFactor(at())
    stepOn(at(), 3)
    const body = { passphrase: PASSPHRASE, code: codeOf(at(), person.secret, 40) }
    for (let i = 0; i < 5; i += 1) refusalOf(await person.agent.send(removeSecondFactor, { body }))
    const right = { ...body, code: codeOf(at(), person.secret) }
    expect((await person.agent.refused(removeSecondFactor, { body: right })).code).toBe('throttled')
  })

  it('is the administrator’s for who has lost the device: with a reason, the sessions ended, the person told', async () => {
    const person = await aPersonWithSecondFactor(at())
    const administrator = await aUser(at().database.db, { role: 'administrator', name: 'Ada Admin' })
    const desk = await at().as(administrator)
    const { items } = await desk.call(listUsers, {})
    expect(items.find(({ id }) => id === person.userId)?.secondFactorSince).not.toBeNull()
    expect(items.find(({ id }) => id === administrator.userId)?.secondFactorSince).toBeNull()

    const params = { id: person.userId }
    const version = await versionOf(desk, person.userId)
    const reason = 'Lost the phone on the train'
    expect((await desk.refused(takeOffSecondFactor, { params, body: { version, reason: '' } })).code).toBe(
      'invalid-input',
    )
    const user = await desk.call(takeOffSecondFactor, { params, body: { version, reason } })
    expect(user.secondFactorSince).toBeNull()
    expect((await person.agent.refused(getSecondFactor, {})).code).toBe('signed-out')
    expect((await trySignIn(at(), person.email)).status).toBe(200)

    const { pool } = at().database.owner
    const { rows: mails } = await pool.query<{ body_text: string }>(
      `select body_text from mail_messages where recipient = $1 and key like 'second-factor-off:%'`,
      [person.email],
    )
    expect(mails.map(({ body_text }) => body_text)).toEqual([expect.stringContaining(`Ada Admin has taken`)])
    expect(mails[0]?.body_text).toContain(reason)
    const { rows } = await pool.query(
      `select actor_name, reason from history where action = 'user.take-off-second-factor' and thing_id = $1`,
      [person.userId],
    )
    expect(rows).toEqual([{ actor_name: 'Ada Admin', reason }])
    const again = await desk.refused(takeOffSecondFactor, { params, body: { version: user.version, reason } })
    expect(again.code).toBe('not-allowed-now')
  })

  it('is nobody’s but the administrator’s, and not for their own', async () => {
    const person = await aPersonWithSecondFactor(at(), { role: 'administrator' })
    const params = { id: person.userId }
    const body = { version: await versionOf(person.agent, person.userId), reason: 'To see' }
    const own = await person.agent.refused(takeOffSecondFactor, { params, body })
    expect(own).toMatchObject({
      code: 'not-allowed-now',
      detail: expect.stringContaining('Your account') as string,
    })
    const manager = await at().as(await aUser(at().database.db, { role: 'qa-manager' }))
    expect((await manager.refused(takeOffSecondFactor, { params, body })).code).toBe('forbidden')
  })
})
