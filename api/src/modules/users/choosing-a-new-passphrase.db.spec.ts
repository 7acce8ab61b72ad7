import {
  forgotPassphrase,
  listUsers,
  resetPassphrase,
  signIn,
  startPassphraseReset,
} from '@weirlight/shared/contracts'
import { beforeEach, describe, expect, it } from 'vitest'
import { aPersonWithPassphrase, PASSPHRASE } from '../../testing/accounts.js'
import type { Agent } from '../../testing/agent.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { LaboratoryModule } from '../laboratory/index.js'
import { lastLinkTo, mailsTo, NEW_PASSPHRASE, reason, versionOf } from './accounts.test-support.js'
import { UsersModule } from './users.module.js'

const at = useTestApp({ imports: [UsersModule, LaboratoryModule] })

let agent: Agent

beforeEach(async () => {
  agent = await at().as(await aUser(at().database.db, { role: 'administrator' }))
})

describe('a new passphrase', () => {
  it('by the link ends every session and every other link, and is told by mail', async () => {
    const person = await aPersonWithPassphrase(at(), { role: 'auditor' })
    const session = await at().as(person)
    const anonymous = at().anonymous()
    await anonymous.call(forgotPassphrase, { body: { email: person.email } })
    const token = await lastLinkTo(at(), person.email)
    await anonymous.call(resetPassphrase, { body: { token, passphrase: NEW_PASSPHRASE } })

    expect((await session.refused(listUsers, {})).code).toBe('signed-out')
    const again = await anonymous.refused(resetPassphrase, {
      body: { token, passphrase: `${NEW_PASSPHRASE} again` },
    })
    expect(again.code).toBe('not-found')
    const old = await anonymous.refused(signIn, { body: { email: person.email, password: PASSPHRASE } })
    expect(old.code).toBe('wrong-passphrase')
    await anonymous.call(signIn, { body: { email: person.email, password: NEW_PASSPHRASE } })
    expect((await mailsTo(at(), person.email)).at(-1)).toContain('was changed')
    const { rows } = await at().database.owner.pool.query<{ new: Record<string, unknown> }>(
      `select new from history where action = 'user.reset-passphrase' and thing_id = $1`,
      [person.userId],
    )
    expect(rows[0]?.new['password_hash']).toBe('(hidden)')
  })

  it('is started by an administrator and chosen by the person alone', async () => {
    const person = await aPersonWithPassphrase(at())
    await agent.call(startPassphraseReset, {
      params: { id: person.userId },
      body: { version: await versionOf(agent, person.userId), reason },
    })
    // the old one holds until the link is used
    await at()
      .anonymous()
      .call(signIn, { body: { email: person.email, password: PASSPHRASE } })
    const token = await lastLinkTo(at(), person.email)
    await at()
      .anonymous()
      .call(resetPassphrase, { body: { token, passphrase: NEW_PASSPHRASE } })
    await at()
      .anonymous()
      .call(signIn, { body: { email: person.email, password: NEW_PASSPHRASE } })
  })

  it('sends no more than three links an hour to one mailbox', async () => {
    const person = await aPersonWithPassphrase(at())
    const anonymous = at().anonymous()
    for (let i = 0; i < 5; i += 1) await anonymous.call(forgotPassphrase, { body: { email: person.email } })
    expect(await mailsTo(at(), person.email)).toHaveLength(3)
    expect((await anonymous.refused(forgotPassphrase, { body: { email: person.email } })).code).toBe(
      'throttled',
    )
  })
})
