import { describe, expect, it } from 'vitest'
import { lineClockWords } from './line-clock'

// constructed
const now = Date.parse('2026-12-01T14:00:00Z')
const at = (minutes: number) => new Date(now + minutes * 60_000).toISOString()
const plain = (text: string) => text.replaceAll('\u00a0', ' ')

describe('lineClockWords', () => {
  it.each([
    [{ at: at(130), sense: 'due', prefix: 'review due' }, 'review due in 2 h 10 min'],
    [{ at: at(-180), sense: 'due', prefix: 'review due' }, 'review late by 3 h'],
    [{ at: at(560), sense: 'due', prefix: 'holding time' }, 'holding time: 9 h 20 min left'],
    [{ at: at(-20), sense: 'due', prefix: 'holding time' }, 'holding time: late by 20 min'],
    [{ at: at(6000), sense: 'due', prefix: 'expires' }, 'expires in 4 days'],
    [{ at: at(-6000), sense: 'due', prefix: 'expires' }, 'expired 4 days ago'],
    [{ at: at(-180), sense: 'since', prefix: 'unanswered' }, 'unanswered for 3 h'],
    [{ at: at(-1800), sense: 'since', prefix: 'begun' }, 'begun 30 h ago'],
    [{ at: null, sense: 'none', prefix: 'not delivered' }, 'not delivered'],
  ] as const)('%o', (clock, words) => expect(plain(lineClockWords(clock, now))).toBe(words))
})
