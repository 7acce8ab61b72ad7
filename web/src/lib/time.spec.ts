import { describe, expect, it } from 'vitest'
import {
  dayOf,
  formatInstant,
  formatInstantWithOffset,
  formatTime,
  offsetText,
  parseDay,
  parseMoment,
} from './time'

// zones and their changes of clock are those of the IANA database; texts are constructed
const NEW_YORK = 'America/New_York'

describe('formatting in the laboratory’s zone', () => {
  it('writes day and time', () => {
    expect(formatInstant('2026-12-01T19:05:31Z', NEW_YORK)).toBe('2026-12-01 14:05')
    expect(formatTime('2026-12-01T19:05:31Z', NEW_YORK)).toBe('14:05:31')
  })
  it('adds the offset of that day, summer and winter', () => {
    expect(formatInstantWithOffset('2026-12-01T19:05:00Z', NEW_YORK)).toBe('2026-12-01 14:05 (UTC−5)')
    expect(formatInstantWithOffset('2026-07-01T18:05:00Z', NEW_YORK)).toBe('2026-07-01 14:05 (UTC−4)')
  })
  it('knows half hours and UTC itself', () => {
    expect(offsetText('Asia/Kolkata', Date.parse('2026-12-01T00:00:00Z'))).toBe('UTC+5:30')
    expect(offsetText('UTC', Date.parse('2026-12-01T00:00:00Z'))).toBe('UTC')
  })
  it('takes the day from the zone, not from UTC', () => {
    expect(dayOf('2026-12-02T03:00:00Z', NEW_YORK)).toBe('2026-12-01')
  })
  it('writes midnight as 00:00', () => {
    expect(formatInstant('2026-12-01T05:00:00Z', NEW_YORK)).toBe('2026-12-01 00:00')
  })
})

describe('parseMoment', () => {
  it('reads the wall clock with its offset', () => {
    expect(parseMoment('2026-12-01 14:05', NEW_YORK)).toBe('2026-12-01T14:05:00-05:00')
    expect(parseMoment(' 2026-7-1 9:05 ', NEW_YORK)).toBe('2026-07-01T09:05:00-04:00')
    expect(parseMoment('2026-12-01 14:05', 'Asia/Kolkata')).toBe('2026-12-01T14:05:00+05:30')
  })
  it('takes the earlier of the hour that autumn repeats', () => {
    expect(parseMoment('2026-11-01 01:30', NEW_YORK)).toBe('2026-11-01T01:30:00-04:00')
  })
  it('gives back what it was given', () => {
    const instant = parseMoment('2026-03-08 03:30', NEW_YORK)
    expect(instant && formatInstant(instant, NEW_YORK)).toBe('2026-03-08 03:30')
  })
  it.each([
    '',
    'yesterday',
    '2026-13-01 10:00',
    '2026-02-30 10:00',
    '2026-12-01 24:00',
    '2026-12-01',
    '01.12.2026 10:00',
  ])('refuses “%s”', (text) => expect(parseMoment(text, NEW_YORK)).toBeNull())
})

describe('parseDay', () => {
  it('completes single digits', () => expect(parseDay('2026-2-3')).toBe('2026-02-03'))
  it.each(['2026-02-29', '2026-00-10', '26-1-1', ''])('refuses “%s”', (text) => {
    expect(parseDay(text)).toBeNull()
  })
})
