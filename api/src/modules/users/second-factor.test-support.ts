import { confirmSecondFactor, signIn, startSecondFactor } from '@weirlight/shared/contracts'
import type { Problem } from '@weirlight/shared/errors'
import { Secret, TOTP } from 'otpauth'
import { expect } from 'vitest'
import { aPersonWithPassphrase, PASSPHRASE } from '../../testing/accounts.js'
import { Agent, type Sent } from '../../testing/agent.js'
import type { TestApp } from '../../testing/test-app.js'

const STEP = 30_000

/** What a device shows; `steps` later or earlier than the application's clock. */
export function codeOf({ database }: TestApp, secret: string, steps = 0): string {
  const timestamp = database.clock.now().getTime() + steps * STEP
  return TOTP.generate({ secret: Secret.fromBase32(secret), timestamp })
}

/** The application's clock stands in the middle of a step, and moves by whole steps. */
export function standStill({ database }: TestApp): void {
  database.clock.pin(new Date(Math.floor(Date.now() / STEP) * STEP + STEP / 2))
}
export function stepOn({ database }: TestApp, steps = 1): void {
  database.clock.pin(new Date(database.clock.now().getTime() + steps * STEP))
}

/** Somebody who signs in with passphrase and code; the code of the set-up's step is used. */
export async function aPersonWithSecondFactor(
  app: TestApp,
  options: Parameters<typeof aPersonWithPassphrase>[1] = {},
) {
  const person = await aPersonWithPassphrase(app, options)
  const agent = await app.as(person)
  const { secret } = await agent.call(startSecondFactor, { body: { passphrase: PASSPHRASE } })
  const { recoveryCodes } = await agent.call(confirmSecondFactor, { body: { code: codeOf(app, secret) } })
  return { ...person, agent, secret, recoveryCodes }
}

export function trySignIn({ app }: TestApp, email: string, code?: string): Promise<Sent> {
  const body = { email, password: PASSPHRASE, ...(code === undefined ? {} : { code }) }
  return new Agent(app).send(signIn, { body })
}

export const problemOf = (sent: Pick<Sent, 'json'>) => sent.json as Problem

/** The sentence of a refused code, which stands on its field. */
export function refusalOf(sent: Sent): string {
  expect(sent.status).toBe(403)
  expect(problemOf(sent)).toMatchObject({ code: 'wrong-code', errors: [{ path: 'code' }] })
  return problemOf(sent).detail
}

/** Two at the same moment with one code: one gets in. @returns the sentence for the other */
export function oneGetsIn(sent: readonly Sent[]): string {
  expect(sent.map(({ status }) => status).sort()).toEqual([200, 403])
  const lost = sent.find(({ status }) => status === 403)
  return lost ? refusalOf(lost) : ''
}
