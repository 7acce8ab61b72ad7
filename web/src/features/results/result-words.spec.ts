import { describe, expect, it } from 'vitest'
import type { Trend } from './api/result-queries'
import { findingOf, shownNumber, trendWords } from './result-words'

// constructed
const judged = { verdict: 'above', limitValue: '0.3', limitUnit: 'mg/L', unit: 'mg/L' } as const

describe('findingOf', () => {
  it('says which side of the limit, with its unit only where it is another', () => {
    expect(findingOf(judged).words).toBe('above 0.3')
    expect(findingOf({ ...judged, limitUnit: 'ug/L', limitValue: '300' }).words).toBe('above 300 µg/L')
  })
  it('keeps the doubt of a value within its uncertainty', () => {
    expect(findingOf({ ...judged, verdict: 'conditional-below' }).words).toBe('below 0.3, within uncertainty')
  })
  it('judges nothing without a limit, whatever else is known', () => {
    expect(findingOf({ ...judged, verdict: null }).words).toBe('no limit')
    expect(findingOf({ ...judged, limitValue: null }).mark.tone).toBe('quiet')
  })
})

describe('shownNumber', () => {
  it('writes a true minus and leaves “<” alone', () => {
    expect(shownNumber('-0.002')).toBe('−0.002')
    expect(shownNumber('<0.010')).toBe('<0.010')
  })
})

describe('trendWords', () => {
  const day = (instant: string) => instant.slice(0, 10)
  const point = (at: string, value: number, text: string) => ({
    resultId: '1',
    at,
    value,
    text,
    verdict: null,
    nonDetect: text.startsWith('<'),
  })
  const trend: Trend = {
    unit: 'ug/L',
    limit: { name: 'secondary level', value: 50, text: '50' },
    points: [
      point('2026-01-05T10:00:00Z', 210, '210'),
      point('2026-02-05T10:00:00Z', 10, '<10'),
      point('2026-03-05T10:00:00Z', 90, '90'),
    ],
  }
  it('gives span, range as reported and limit', () => {
    expect(trendWords(trend, day)).toBe(
      '3 results from 2026-01-05 to 2026-03-05, between <10 and 210 µg/L. Limit 50 µg/L, secondary level.',
    )
  })
  it('says that there is nothing', () => {
    expect(trendWords({ ...trend, points: [] }, day)).toBe('No released results yet.')
  })
})
