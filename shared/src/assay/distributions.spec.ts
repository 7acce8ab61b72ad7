import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  fUpperProbability,
  normalUpperProbability,
  tTwoSidedProbability,
  tTwoSidedQuantile,
} from './distributions.js'
import { mandelTest } from './linearity-tests.js'
import { grubbsTest } from './outlier-tests.js'

function near(got: number, expected: number, relative: number, size = 0): void {
  expect(Math.abs(got - expected), `${got} for ${expected}`).toBeLessThanOrEqual(
    relative * Math.max(Math.abs(expected), size),
  )
}

describe('far tails', () => {
  // computed with mpmath, 40 digits
  it.each([
    ['t 50, 22 df', () => tTwoSidedProbability(50, 22), 3.75830709598185e-24],
    ['t 1000, 8 df', () => tTwoSidedProbability(1000, 8), 1.11996774459135e-21],
    ['F 50, 10 and 20 df', () => fUpperProbability(50, 10, 20), 6.15037213740717e-12],
    ['normal 10', () => normalUpperProbability(10), 7.61985302416053e-24],
    ['normal 37', () => normalUpperProbability(37), 5.72557122252458e-300],
  ])('%s', (_name, compute, expected) => {
    near(compute(), expected, 1e-12)
  })

  it('the two-sided quantile of a confidence has the confidence inside', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.01, max: 0.999, noNaN: true }),
        fc.integer({ min: 1, max: 200 }),
        (p, df) => {
          near(1 - tTwoSidedProbability(tTwoSidedQuantile(p, df), df), p, 1e-10)
        },
      ),
    )
  })
})

describe('tests', () => {
  it('Mandel finds no curvature in an exact line and all of it in an exact parabola', () => {
    const line = mandelTest([0, 0.1, 0.2, 0.3, 0.4, 0.5].map((x) => ({ x, y: 0.1 + 0.7 * x })))
    expect(line.verdict95).toBe('linear')
    const parabola = mandelTest([0, 1, 2, 3, 4, 5].map((x) => ({ x, y: x + x * x })))
    expect(parabola.verdict99).toBe('not-linear')
    expect(parabola.probability).toBeLessThan(1e-20)
  })

  it('Grubbs: the verdict agrees with the probability', () => {
    const list = fc.array(fc.double({ min: -10, max: 10, noNaN: true }), { minLength: 3, maxLength: 20 })
    fc.assert(
      fc.property(list, fc.constantFrom(1 as const, 2 as const), (values, sides) => {
        fc.pre(new Set(values).size > 2)
        const found = grubbsTest(values, { sides })
        fc.pre(Math.abs(found.probability - 0.05) > 1e-9)
        expect(found.outlier).toBe(found.probability < 0.05)
      }),
    )
  })
})
