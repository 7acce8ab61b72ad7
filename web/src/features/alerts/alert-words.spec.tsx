import { describe, expect, it } from 'vitest'
import type { AlertView } from './api/alert-queries'
import { earlierWords, trendOfAlert } from './alert-words'

// constructed
const alert = {
  resultId: '9',
  text: '0.21',
  unit: 'mg/L',
  limitName: 'Secondary level',
  limitValue: '50',
  limitUnit: 'ug/L',
  collectedAt: '2026-11-30T13:40:00Z',
  earlier: [
    { at: '2026-10-30T13:40:00Z', text: '0.18', verdict: 'above' },
    { at: '2026-09-30T13:40:00Z', text: '<0.010', verdict: 'below' },
  ],
} as unknown as AlertView

describe('trendOfAlert', () => {
  const trend = trendOfAlert(alert)
  it('puts the limit into the unit of the result', () => {
    expect(trend.limit).toEqual({ name: 'Secondary level', value: 0.05, text: '0.050' })
  })
  it('draws earlier and this one in time, a non-detect at the number behind its “<”', () => {
    expect(trend.points.map((point) => [point.text, point.value, point.nonDetect])).toEqual([
      ['<0.010', 0.01, true],
      ['0.18', 0.18, false],
      ['0.21', 0.21, false],
    ])
  })
  it('draws no limit that was not kept', () => {
    expect(trendOfAlert({ ...alert, limitValue: '' }).limit).toBeNull()
  })
})

describe('earlierWords', () => {
  const points = trendOfAlert(alert).points
  it('gives the range as reported', () => {
    expect(earlierWords(points.slice(0, 2), 'mg/L')).toBe('The 2 before: <0.010 to 0.18 mg/L.')
    expect(earlierWords(points.slice(1, 2), 'ug/L')).toBe('The result before: 0.18 µg/L.')
    expect(earlierWords([], 'mg/L')).toBeNull()
  })
})
