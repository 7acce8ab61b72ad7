import type { Problem } from '@weirlight/shared/errors'
import { expect } from 'vitest'
import type { Sent } from './agent.js'

/** Two at the same moment: one is answered, the other refused with the problem that is returned. */
export function oneWins(sent: readonly Pick<Sent, 'status' | 'json'>[]): Problem {
  expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
  return sent.find(({ status }) => status === 409)?.json as Problem
}
