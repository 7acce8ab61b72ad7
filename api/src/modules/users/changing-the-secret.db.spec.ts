import { confirmSecondFactor, removeSecondFactor, startSecondFactor } from '@weirlight/shared/contracts'
import { beforeEach, describe, expect, it } from 'vitest'
import { PASSPHRASE } from '../../testing/accounts.js'
import { createTestApp, useTestApp } from '../../testing/test-app.js'
import {
  aPersonWithSecondFactor,
  codeOf,
  refusalOf,
  standStill,
  stepOn,
  trySignIn,
} from './second-factor.test-support.js'
import { UsersModule } from './users.module.js'

// In a file of its own: passport keeps one strategy a process, so only the newest application signs anybody in.
const at = useTestApp({ imports: [UsersModule] })

beforeEach(() => standStill(at()))

describe('a server with another secret', () => {
  it('reads no device’s code any more, takes recovery codes, and a new set-up works', async () => {
    const person = await aPersonWithSecondFactor(at())
    const { database } = at()
    const other = await createTestApp({
      imports: [UsersModule],
      database,
      settings: { sessionSecret: 'quite another secret, of forty letters and more' },
    })
    try {
      stepOn(at())
      expect(refusalOf(await trySignIn(other, person.email, codeOf(at(), person.secret)))).toContain(
        'Use a recovery code',
      )
      const [first = '', second = ''] = person.recoveryCodes
      expect((await trySignIn(other, person.email, first)).status).toBe(200)
      const agent = await other.as(person)
      await agent.call(removeSecondFactor, { body: { passphrase: PASSPHRASE, code: second } })
      const { secret } = await agent.call(startSecondFactor, { body: { passphrase: PASSPHRASE } })
      await agent.call(confirmSecondFactor, { body: { code: codeOf(other, secret) } })
      stepOn(at())
      expect((await trySignIn(other, person.email, codeOf(other, secret))).status).toBe(200)
    } finally {
      await other.close()
    }
  })
})
