import { describe, expect, it } from 'vitest'
import { agoWords, byClock, dueTone, dueWords, durationWords, windowWords } from './clock-words'

// every expected text here is constructed
const now = Date.parse('2026-12-01T14:00:00Z')
const at = (minutes: number) => new Date(now + minutes * 60_000).toISOString()

describe('durationWords', () => {
  it.each([
    [20_000, 'less than a minute'],
    [59 * 60_000, '59 min'],
    [60 * 60_000, '1 h'],
    [(9 * 60 + 20) * 60_000, '9 h 20 min'],
    [26.5 * 3_600_000, '26 h'],
    [4.9 * 86_400_000, '4 days'],
    [-3 * 3_600_000, '3 h'],
  ])('%d ms is %s', (milliseconds, words) => {
    expect(durationWords(milliseconds)).toBe(words)
  })
})

describe('dueWords', () => {
  it('says what is left', () => expect(dueWords(at(560), now)).toBe('9 h 20 min left'))
  it('says how late it is', () => expect(dueWords(at(-180), now)).toBe('late by 3 h'))
  it('is a caution when it is soon and a finding when it is late', () => {
    expect(dueTone(at(13 * 60), now)).toBe('quiet')
    expect(dueTone(at(11 * 60), now)).toBe('caution')
    expect(dueTone(at(-1), now)).toBe('above')
  })
  it('says how long ago', () => expect(agoWords(at(-6), now)).toBe('6 min ago'))
})

describe('windowWords', () => {
  const window = (startedMinutesAgo: number) => ({
    startedAt: at(-startedMinutesAgo),
    fromMinutes: 10,
    toMinutes: 60,
  })
  it.each([
    [4, 'opens in 6 min', false],
    [12, '2 min into the reading window', true],
    [52, 'closes in 8 min', true],
    [63, 'closed 3 min ago', false],
  ])('%d min after the reagent: %s', (age, words, isOpen) => {
    expect(windowWords(window(age), now)).toMatchObject({ words, isOpen })
  })
})

describe('byClock', () => {
  it('puts first what runs out first, and last what has no clock', () => {
    const rows = [
      { name: 'none', due: null },
      { name: 'later', due: at(90) },
      { name: 'late', due: at(-5) },
      { name: 'also none', due: null },
    ]
    expect(byClock(rows, (row) => row.due).map((row) => row.name)).toEqual([
      'late',
      'later',
      'none',
      'also none',
    ])
  })
})
