import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { detectionLimits } from './detection-limits.js'
import { fitCalibration, type FitCalibrationInput } from './fit-calibration.js'
import { lackOfFitTest, mandelTest } from './linearity-tests.js'
import { predictConcentration } from './predict-concentration.js'

/* 300 generated calibrations recomputed once with NumPy and SciPy; calibrations.py beside the answers says how. */

type Numbers = Record<string, number | number[] | Record<string, number>>
interface Reference {
  calibrations: {
    input: FitCalibrationInput
    fit: Numbers
    prediction: Numbers & { input: { absorbances: number[]; confidence: number; responseWeight: number } }
    limits: (Numbers & { alpha: number; readings: number }) | null
    mandel: Numbers | null
    lackOfFit: Numbers | null
  }[]
}

const file = new URL('../../../fixtures/assay/reference/calibrations.json', import.meta.url)
const { calibrations } = JSON.parse(readFileSync(file, 'utf8')) as Reference

/** Relative to the expected value, or to the size the numbers have where the value itself is a small difference. */
function expectClose(found: {
  got: unknown
  expected: unknown
  name: string
  relative: number
  size?: number
}): void {
  const { got, expected, name, relative, size = 0 } = found
  if (typeof expected === 'number') {
    expect(typeof got, name).toBe('number')
    expect(Math.abs(Number(got) - expected), `${name}: ${String(got)} for ${expected}`).toBeLessThanOrEqual(
      relative * Math.max(Math.abs(expected), size),
    )
    return
  }
  for (const [key, value] of Object.entries(expected as Record<string, unknown>)) {
    const part = (got as Record<string, unknown> | null)?.[key]
    expectClose({ got: part, expected: value, name: `${name}.${key}`, relative, size })
  }
}

describe('generated calibrations against NumPy and SciPy', () => {
  it('covers every model and weighting', () => {
    expect(calibrations).toHaveLength(300)
    expect(new Set(calibrations.map(({ input }) => `${input.model} ${input.weighting}`)).size).toBe(12)
  })

  it.each(calibrations.map((entry, i) => [i, entry] as const))('calibration %i', (_i, entry) => {
    const fit = fitCalibration(entry.input)
    const top = Math.max(...entry.input.points.map((point) => Math.abs(point.absorbance)))
    const { coefficients, rSquared, ...rest } = entry.fit
    expectClose({ got: fit, expected: rest, name: 'fit', relative: 1e-9 })
    expectClose({ got: fit.rSquared, expected: rSquared, name: 'rSquared', relative: 1e-12 })
    const scale = Array.isArray(coefficients) ? coefficients : []
    scale.forEach((expected, power) => {
      const size = (1e-3 * top) / fit.range.high ** power
      expectClose({
        got: fit.coefficients[power],
        expected,
        name: `coefficient ${power}`,
        relative: 1e-10,
        size,
      })
    })

    const { input, ...prediction } = entry.prediction
    const size = 1e-2 * fit.range.high
    expectClose({
      got: predictConcentration(fit, input),
      expected: prediction,
      name: 'prediction',
      relative: 1e-9,
      size,
    })

    if (entry.limits) {
      const { alpha, readings, ...limits } = entry.limits
      expectClose({
        got: detectionLimits(fit, { alpha, readings }),
        expected: limits,
        name: 'limits',
        relative: 1e-9,
      })
    }
    if (entry.mandel) {
      const got = mandelTest(entry.input.points)
      expectClose({
        got,
        expected: entry.mandel,
        name: 'Mandel',
        relative: 1e-8,
        size: 1e-3 * got.linearResidualSd,
      })
    }
    if (entry.lackOfFit) {
      const got = lackOfFitTest(entry.input.points)
      expectClose({ got, expected: entry.lackOfFit, name: 'lack of fit', relative: 1e-8 })
    }
  })
})
