import { confirmSecondFactor, getSecondFactor, startSecondFactor } from '@weirlight/shared/contracts'
import { Secret } from 'otpauth'
import { beforeEach, describe, expect, it } from 'vitest'
import { aPersonWithPassphrase, PASSPHRASE } from '../../testing/accounts.js'
import { useTestApp } from '../../testing/test-app.js'
import {
  aPersonWithSecondFactor,
  codeOf,
  refusalOf,
  standStill,
  trySignIn,
} from './second-factor.test-support.js'
import { UsersModule } from './users.module.js'

const at = useTestApp({ imports: [UsersModule] })

beforeEach(() => standStill(at()))

describe('setting up a second factor', () => {
  it('wants the passphrase and a code of the device, tells ten recovery codes once, and is written down', async () => {
    const person = await aPersonWithPassphrase(at())
    const agent = await at().as(person)
    expect(await agent.call(getSecondFactor, {})).toEqual({ since: null, recoveryCodesLeft: 0 })
    const refused = await agent.refused(startSecondFactor, { body: { passphrase: 'not this passphrase' } })
    expect(refused).toMatchObject({ code: 'wrong-passphrase', errors: [{ path: 'passphrase' }] })

    const { secret, uri } = await agent.call(startSecondFactor, { body: { passphrase: PASSPHRASE } })
    expect(uri).toContain(`secret=${secret}`)
    const wrong = codeOf(at(), secret, 40)
    refusalOf(await agent.send(confirmSecondFactor, { body: { code: wrong } }))
    // begun is not on: the passphrase alone signs in
    expect((await agent.call(getSecondFactor, {})).since).toBeNull()
    expect((await trySignIn(at(), person.email)).status).toBe(200)

    const { recoveryCodes } = await agent.call(confirmSecondFactor, {
      body: { code: codeOf(at(), secret) },
    })
    expect(new Set(recoveryCodes).size).toBe(10)
    const now = await agent.call(getSecondFactor, {})
    expect(now).toMatchObject({ since: expect.stringMatching(/^\d{4}-/), recoveryCodesLeft: 10 })
    expect(JSON.stringify(now)).not.toContain(secret)

    const { rows } = await at().database.owner.pool.query(
      `select actor_name, new ? 'second_factor_since' as since from history
       where action = 'user.set-up-second-factor' and thing = 'users' and thing_id = $1`,
      [person.userId],
    )
    expect(rows).toEqual([{ actor_name: person.name, since: true }])
  })

  it('begun again takes another secret; once on, it is neither begun nor confirmed again', async () => {
    const person = await aPersonWithPassphrase(at())
    const agent = await at().as(person)
    const body = { passphrase: PASSPHRASE }
    const first = await agent.call(startSecondFactor, { body })
    const second = await agent.call(startSecondFactor, { body })
    refusalOf(await agent.send(confirmSecondFactor, { body: { code: codeOf(at(), first.secret) } }))
    const code = codeOf(at(), second.secret)
    const sent = await Promise.all([1, 2].map(() => agent.send(confirmSecondFactor, { body: { code } })))
    expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
    expect((await agent.refused(startSecondFactor, { body })).code).toBe('not-allowed-now')
  })

  it('keeps the secret out of history, and out of reach of whoever reads the database', async () => {
    const { secret, recoveryCodes, userId } = await aPersonWithSecondFactor(at())
    const { pool } = at().database.owner
    const { rows } = await pool.query<{ row: string }>(
      'select secret::text, recovery_hashes from second_factors where user_id = $1',
      [userId],
    )
    const kept = JSON.stringify(rows)
    const { hex } = Secret.fromBase32(secret)
    for (const one of [
      secret,
      hex.toLowerCase(),
      ...recoveryCodes,
      ...recoveryCodes.map((code) => code.replaceAll('-', '')),
    ])
      expect(kept).not.toContain(one)
    const { rows: written } = await pool.query<{ old: unknown; new: unknown; thing: string }>(
      'select thing, old, new from history where actor_id = $1',
      [userId],
    )
    expect(written.length).toBeGreaterThan(0)
    expect(written.some(({ thing }) => thing === 'second_factors')).toBe(false)
    const history = JSON.stringify(written)
    for (const one of [secret, hex.toLowerCase(), ...recoveryCodes]) expect(history).not.toContain(one)
  })
})
