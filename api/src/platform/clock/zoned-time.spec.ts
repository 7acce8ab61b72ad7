import { describe, expect, it } from 'vitest'
import { readTime, showDay, showTime } from './zoned-time.js'

// Expected values: constructed; the nights when clocks change are those of the IANA time zone data base.
const at = (text: string, zone: string) => {
  const read = readTime(text, zone)
  return 'at' in read ? read.at.toISOString() : read.problem
}

describe('a time as people write it', () => {
  it.each([
    ['2026-12-01 14:05', 'Europe/Vienna', '2026-12-01T13:05:00.000Z'],
    ['2026-07-01 14:05', 'Europe/Vienna', '2026-07-01T12:05:00.000Z'],
    ['2026-12-01T14:05:30', 'America/Chicago', '2026-12-01T20:05:30.000Z'],
    ['2026-12-01 9:05', 'UTC', '2026-12-01T09:05:00.000Z'],
    ['2026-12-01 14:05+05:30', 'America/Chicago', '2026-12-01T08:35:00.000Z'],
    ['2026-12-01T14:05:00Z', 'America/Chicago', '2026-12-01T14:05:00.000Z'],
    ['1850-01-01 00:00', 'UTC', '1850-01-01T00:00:00.000Z'],
  ])('%s in %s is %s', (text, zone, expected) => expect(at(text, zone)).toBe(expected))

  it('an hour that clocks jump over does not exist', () => {
    expect(at('2026-03-29 02:30', 'Europe/Vienna')).toBe('no-such-time')
    expect(at('2026-03-08 02:30', 'America/Chicago')).toBe('no-such-time')
  })
  it('an hour that comes twice asks for its offset', () => {
    expect(at('2026-10-25 02:30', 'Europe/Vienna')).toBe('twice')
    expect(at('2026-10-25 02:30+02:00', 'Europe/Vienna')).toBe('2026-10-25T00:30:00.000Z')
  })
  it.each([
    '',
    '1.12.2026 14:05',
    '2026-02-31 10:00',
    '2026-12-01 24:30',
    '2026-12-01',
    'yesterday',
    '2026-13-01 10:00',
  ])('“%s” is not read', (text) => expect(at(text, 'UTC')).toBe('unreadable'))
  it('shows the wall clock of the zone', () => {
    expect(showTime(new Date('2026-12-31T23:30:00Z'), 'Europe/Vienna')).toBe('2027-01-01 00:30')
    expect(showDay(new Date('2026-12-31T23:30:00Z'), 'America/Chicago')).toBe('2026-12-31')
  })
})
