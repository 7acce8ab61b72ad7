import { describe, expect, it } from 'vitest'
import { measuredOf, percentile } from './measured.js'

describe('percentile', () => {
  it('is a time that was really measured: the nearest rank', () => {
    // constructed: 1 to 100, so that the rank is the value
    const times = Array.from({ length: 100 }, (_, index) => index + 1)
    expect([0.5, 0.95, 0.99].map((share) => percentile(times, share))).toEqual([50, 95, 99])
    expect(percentile([7], 0.99)).toBe(7)
    expect(percentile([], 0.5)).toBeNaN()
  })
})

describe('measuredOf', () => {
  it('counts by the time all of them took together, and does not mind their order', () => {
    // constructed: 4 pieces of work in half a second
    expect(measuredOf([9, 1, 5, 3], { name: 'x', atATime: 2, tookMs: 500 })).toEqual({
      name: 'x',
      atATime: 2,
      requests: 4,
      perSecond: 8,
      p50: 3,
      p95: 9,
      p99: 9,
      statements: null,
    })
  })
})
