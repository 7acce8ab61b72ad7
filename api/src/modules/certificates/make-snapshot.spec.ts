import { describe, expect, it } from 'vitest'
import { withEditions } from './make-snapshot.js'

// constructed
describe('the sources of a method on a certificate', () => {
  it('stand each with its edition', () => {
    expect(withEditions('HJ/T 345; ISO 6332', '2007; 1988')).toBe('HJ/T 345 (2007); ISO 6332 (1988)')
  })
  it.each([
    ['ISO 6333', '1986', 'ISO 6333, 1986'],
    ['A; B', '1986', 'A; B, 1986'],
  ])('%s of %s: %s', (sources, editions, words) => {
    expect(withEditions(sources, editions)).toBe(words)
  })
})
