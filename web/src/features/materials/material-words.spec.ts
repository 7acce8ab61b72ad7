import { describe, expect, it } from 'vitest'
import { strengthWords, usableMark } from './material-words'

// lots and days: constructed
const lot = { state: 'in-use', expiresOn: '2026-12-31', usable: true } as const

describe('a lot in words', () => {
  it.each([
    ['2026-12-01', 'usable'],
    ['2026-12-17', 'usable, 14 days left'],
    ['2026-12-30', 'usable, 1 day left'],
    ['2026-12-31', 'usable, expires today'],
  ])('on %s it is %s', (today, word) => {
    expect(usableMark(lot, today).word).toBe(word)
  })
  it('says since when it may not be used', () => {
    expect(usableMark({ ...lot, usable: false }, '2027-01-01').word).toBe('expired 1 day ago')
    expect(usableMark({ ...lot, state: 'withdrawn', usable: false }, '2026-12-01').word).toBe('withdrawn')
    expect(usableMark({ ...lot, state: 'used-up', usable: false }, '2026-12-01').word).toBe('used up')
  })
  it('writes strength with its uncertainty', () => {
    expect(strengthWords({ concentration: '1000', uncertainty: '3' })).toBe('1000 ± 3 mg/L')
    expect(strengthWords({ concentration: '2.00', uncertainty: null })).toBe('2.00 mg/L')
    expect(strengthWords({ concentration: null, uncertainty: null })).toBe('')
  })
})
