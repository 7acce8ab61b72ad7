import { describe, expect, it } from 'vitest'
import { isWithinTolerance } from './check-outcome'

// all numbers constructed
describe('a check against its tolerance', () => {
  it.each([
    ['656.1', '656.4', '0.3', true],
    ['656.1', '656.41', '0.3', false],
    ['0.1', '0.4', '.3', true],
    ['0', '-0.002', '0.002', true],
    ['0', '-0.0021', '0.002', false],
    ['1', '1', '0', true],
  ])('nominal %s, found %s, tolerance %s: %s', (nominal, found, tolerance, expected) => {
    expect(isWithinTolerance({ nominal, found, tolerance })).toBe(expected)
  })
  it.each([
    ['', '1', '1'],
    ['1', '1,2', '1'],
    ['1', 'x', '1'],
    ['1', '1', undefined],
  ])('says nothing while a number is missing or none', (nominal, found, tolerance) => {
    expect(isWithinTolerance({ nominal, found, tolerance })).toBeNull()
  })
})
