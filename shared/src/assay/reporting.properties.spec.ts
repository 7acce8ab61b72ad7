import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { compareWithLimit } from './compare-with-limit.js'
import { percentile90, runningAnnualAverage } from './compliance-statistics.js'
import { holdTime } from './hold-time.js'
import { expectedSlope, molarAbsorptivity, readableRange, transitionEnergy } from './light.js'
import { reportValue } from './report-value.js'
import { roundReported, type Rounding } from './rounding.js'
import { DECISION_RULES, NON_DETECT_RULES } from './rule-names.js'
import { solutionColour } from './solution-colour.js'
import { convertUnit, CONCENTRATION_UNITS } from './units.js'

/* Properties need no published number: each follows from what the function promises. */

const concentration = fc.double({ min: -10, max: 1000, noNaN: true })
const positive = fc.double({ min: 1e-6, max: 1000, noNaN: true })
const rounding: fc.Arbitrary<Rounding> = fc.record({
  to: fc.constantFrom('significant', 'decimals'),
  digits: fc.integer({ min: 1, max: 8 }),
  ties: fc.constantFrom('half-up', 'half-even'),
})

describe('rounding', () => {
  it('is idempotent', () => {
    fc.assert(
      fc.property(fc.double({ min: -1e6, max: 1e6, noNaN: true }), rounding, (value, rule) => {
        const once = roundReported(value, rule)
        expect(roundReported(Number(once), rule)).toBe(once)
      }),
    )
  })

  it('never moves a value by more than half a step, and keeps order', () => {
    fc.assert(
      fc.property(concentration, concentration, fc.integer({ min: 0, max: 6 }), (a, b, digits) => {
        const rule = { to: 'decimals', digits, ties: 'half-even' } as const
        const [low, high] = a <= b ? [a, b] : [b, a]
        expect(Number(roundReported(low, rule))).toBeLessThanOrEqual(Number(roundReported(high, rule)))
        expect(Math.abs(Number(roundReported(a, rule)) - a)).toBeLessThanOrEqual(
          0.5 * 10 ** -digits * (1 + 1e-9),
        )
      }),
    )
  })

  it('writes plain numbers only', () => {
    fc.assert(
      fc.property(fc.double({ min: -1e9, max: 1e9, noNaN: true }), rounding, (value, rule) => {
        expect(roundReported(value, rule)).toMatch(/^-?\d+(\.\d+)?$/)
      }),
    )
  })
})

describe('comparison with a limit', () => {
  const order = ['below', 'conditional-below', 'conditional-above', 'above']

  it('never gives a better verdict as the value rises', () => {
    const rule = fc.constantFrom(...DECISION_RULES)
    const guard = fc.double({ min: 0, max: 3, noNaN: true })
    fc.assert(
      fc.property(
        fc.record({
          a: concentration,
          b: concentration,
          u: positive,
          limit: positive,
          rule,
          guard,
          rounding,
        }),
        ({ a, b, u, limit, rule: decision, guard: guardFactor, rounding: how }) => {
          const settled = Number(roundReported(limit, how))
          const at = (value: number) =>
            compareWithLimit({
              value,
              expandedUncertainty: u,
              limit: settled,
              rule: decision,
              guardFactor,
              rounding: how,
            })
          const low = at(Math.min(a, b))
          const high = at(Math.max(a, b))
          expect(order.indexOf(low.verdict)).toBeLessThanOrEqual(order.indexOf(high.verdict))
          expect(low.probabilityAboveLimit ?? 1).toBeLessThanOrEqual(high.probabilityAboveLimit ?? 0)
        },
      ),
    )
  })

  it('rounded: tips over exactly at its acceptance limit', () => {
    fc.assert(
      fc.property(concentration, positive, rounding, (value, limit, how) => {
        const settled = Number(roundReported(limit, how))
        const answer = compareWithLimit({ value, limit: settled, rule: 'rounded', rounding: how })
        if (value < answer.acceptanceLimit) expect(answer.verdict).toBe('below')
        if (value > answer.acceptanceLimit) expect(answer.verdict).toBe('above')
      }),
    )
  })

  it('more guard band never accepts more', () => {
    fc.assert(
      fc.property(concentration, positive, positive, (value, u, limit) => {
        const simple = compareWithLimit({ value, expandedUncertainty: u, limit, rule: 'simple' })
        const guarded = compareWithLimit({ value, expandedUncertainty: u, limit, rule: 'guarded' })
        if (guarded.verdict === 'below') expect(simple.verdict).toBe('below')
      }),
    )
  })
})

describe('reporting of values', () => {
  it('never prints zero below a limit and never counts a higher value as less within one zone', () => {
    const rule = fc.constantFrom(...NON_DETECT_RULES.filter((name) => name !== 'as-measured'))
    fc.assert(
      fc.property(fc.double({ min: -1, max: 0.0099, noNaN: true }), rule, (value, nonDetect) => {
        const report = reportValue({
          concentration: value,
          limits: { detection: 0.01, quantification: 0.03 },
          nonDetect,
          rounding: { to: 'significant', digits: 2, ties: 'half-up' },
          unit: 'mg/L',
        })
        expect(report.valueText).toMatch(/^<0\.0[13]0$/)
        expect(report.flags).toContain('not-detected')
        expect(report.numericForCompliance).toBeGreaterThanOrEqual(0)
      }),
    )
  })
})

describe('compliance statistics', () => {
  const values = fc.array(fc.double({ min: 0, max: 10, noNaN: true }), { minLength: 1, maxLength: 120 })
  const whenFractional = fc.constantFrom(
    'interpolate' as const,
    'round-up' as const,
    'round-to-nearest' as const,
  )

  it('the percentile lies among the values, whatever their order', () => {
    fc.assert(
      fc.property(values, whenFractional, (list, how) => {
        const found = percentile90({ values: list, whenFractional: how })
        expect(found.value).toBeGreaterThanOrEqual(Math.min(...list))
        expect(found.value).toBeLessThanOrEqual(Math.max(...list))
        expect(percentile90({ values: list.toReversed(), whenFractional: how })).toEqual(found)
      }),
    )
  })

  it('what is certain already exceeds whatever non-negative results follow', () => {
    const quarter = fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 1, maxLength: 4 })
    fc.assert(
      fc.property(fc.array(quarter, { minLength: 1, maxLength: 3 }), quarter, (known, next) => {
        const listed = (lists: number[][]) => lists.map((results, index) => ({ quarter: index, results }))
        const before = runningAnnualAverage({ quarters: listed(known), limit: 0.3 })
        const after = runningAnnualAverage({ quarters: listed([...known, next]), limit: 0.3 })
        if (before.certainAlready) expect(after.certainAlready).toBe(true)
        if (before.certainAlready) expect(after.exceeds).toBe(true)
      }),
    )
  })
})

describe('units, time and light', () => {
  it('conversion there and back returns the value', () => {
    const unit = fc.constantFrom(...CONCENTRATION_UNITS)
    fc.assert(
      fc.property(positive, unit, unit, (value, from, to) => {
        const there = convertUnit({ value, from, to, molarMass: 55.845 })
        const back = convertUnit({ value: there, from: to, to: from, molarMass: 55.845 })
        expect(Math.abs(back - value)).toBeLessThanOrEqual(1e-14 * Math.abs(value))
      }),
    )
  })

  it('the end of a holding time never moves with the moment asked about', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 10_000_000 }), (later) => {
        const start = Date.UTC(2026, 0, 1)
        const answer = holdTime({
          collectedAt: new Date(start),
          preservation: 'none',
          rule: { hours: 24 },
          at: new Date(start + later * 1000),
        })
        expect(answer.dueAt).toBe('2026-01-02T00:00:00.000Z')
        expect(answer.state === 'breached').toBe(later > 86_400)
      }),
    )
  })

  it('slope and molar absorptivity undo each other', () => {
    fc.assert(
      fc.property(positive, positive, positive, (epsilon, molarMass, pathLengthCm) => {
        const slope = expectedSlope({ molarAbsorptivity: epsilon, molarMass, pathLengthCm })
        const back = molarAbsorptivity({ slope, molarMass, pathLengthCm })
        expect(Math.abs(back / epsilon - 1)).toBeLessThan(1e-12)
      }),
    )
  })

  it('a shorter wave carries more energy, a darker solution less light', () => {
    const band = { peakNm: 510, widthShortNm: 60, widthLongNm: 25 }
    fc.assert(
      fc.property(positive, positive, (a, b) => {
        // neighbouring doubles share a quotient
        fc.pre(a * (1 + 1e-12) < b)
        expect(transitionEnergy({ wavelengthNm: a }).kJPerMol).toBeGreaterThan(
          transitionEnergy({ wavelengthNm: b }).kJPerMol,
        )
        expect(solutionColour({ band, absorbance: a }).luminance).toBeGreaterThanOrEqual(
          solutionColour({ band, absorbance: b }).luminance,
        )
      }),
    )
  })

  it('an absorbance is in exactly one place', () => {
    fc.assert(
      fc.property(concentration, (absorbance) => {
        const place = readableRange(absorbance, { low: 0.1, high: 1 })
        expect(place).toBe(absorbance < 0.1 ? 'below' : absorbance > 1 ? 'above' : 'good')
      }),
    )
  })
})
