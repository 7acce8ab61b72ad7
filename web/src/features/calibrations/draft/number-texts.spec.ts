import { describe, expect, it } from 'vitest'
import { isDust, withError } from './number-texts'

/* constructed */
describe('a value with its standard error', () => {
  it('has two digits of the error and the value to the same place', () => {
    expect(withError(0.196983, 0.000251)).toBe('0.19698 ± 0.00025')
  })
  it('stands alone when the points lie on the line and the error is the dust of binary arithmetic', () => {
    expect(withError(0.39, 1.9e-17)).toBe('0.39000')
    expect(withError(-0.001, 0)).toBe('−0.0010000')
  })
  it('tells dust from a small scatter', () => {
    expect([7.4e-17, -1e-12, 1e-6].map(isDust)).toEqual([true, true, false])
  })
})
