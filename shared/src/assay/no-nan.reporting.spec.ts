import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { AssayError } from './assay-error.js'
import { fitCalibration } from './fit-calibration.js'
import { validationFunctions } from './validation-functions.js'

/* No NaN or Infinity leaves the engine, and nothing but an AssayError is thrown, whatever comes in. */

function badNumbers(value: unknown, path = ''): string[] {
  if (typeof value === 'number') return Number.isFinite(value) ? [] : [`${path}: ${value}`]
  if (typeof value !== 'object' || value === null) return []
  return Object.entries(value).flatMap(([key, part]) => badNumbers(part, `${path}.${key}`))
}

function refusesOrAnswers(name: string, args: readonly unknown[]): void {
  const compute = validationFunctions[name]
  if (compute === undefined) throw new Error(`no function ${name}`)
  let answer: unknown
  try {
    answer = compute(...args)
  } catch (error) {
    if (!(error instanceof AssayError)) throw error
    expect(error.message.length).toBeGreaterThan(10)
    return
  }
  expect(badNumbers(answer), name).toEqual([])
}

const hostile = fc.oneof(
  { weight: 6, arbitrary: fc.double() },
  { weight: 3, arbitrary: fc.double({ min: -5, max: 100, noNaN: true }) },
  {
    weight: 3,
    arbitrary: fc.constantFrom(
      0,
      -0,
      1,
      -1,
      Number.MAX_VALUE,
      -Number.MAX_VALUE,
      Number.MIN_VALUE,
      1e-300,
      1e300,
      Infinity,
      NaN,
    ),
  },
  { weight: 1, arbitrary: fc.constantFrom(undefined, null, '', '1', '1,5', [], {}, true) },
)
const list = fc.array(hostile, { maxLength: 12 })
const rounding = fc.oneof(
  fc.record({
    to: fc.constantFrom('significant', 'decimals', 'other'),
    digits: fc.oneof(fc.integer({ min: -1, max: 16 }), hostile),
    ties: fc.constantFrom('half-up', 'half-even', 'other'),
  }),
  hostile,
)
const preservation = fc.oneof(
  fc.constantFrom('none', 'nitric-acid'),
  fc.record({ kind: fc.constant('nitric-acid'), pH: hostile, temperatureC: hostile }),
  hostile,
)
const instant = fc.oneof(
  fc.constantFrom(
    '2026-03-02T08:00:00Z',
    '2026-13-99T08:00:00Z',
    'yesterday',
    new Date(NaN),
    new Date(8.64e15),
  ),
  hostile,
)
const unit = fc.constantFrom('mg/L', 'ug/L', 'mmol/L', 'umol/L', 'ppm', '', null)
const one = (model: Record<string, fc.Arbitrary<unknown>>) => fc.record(model).map((input) => [input])

const fits = (['linear', 'linear-through-origin', 'quadratic'] as const).map((model) =>
  fitCalibration({
    model,
    points: [0, 1, 2, 4, 8].map((concentration) => ({
      concentration,
      absorbance: 0.2 * concentration + (concentration % 2) / 100,
    })),
  }),
)

const inputs: Record<string, fc.Arbitrary<unknown[]>> = {
  applyDilution: one({
    concentration: hostile,
    standardError: hostile,
    dilutionFactor: hostile,
    relativeDilutionUncertainty: hostile,
  }),
  colourMatching: one({ wavelengthNm: hostile }),
  compareWithLimit: one({
    value: hostile,
    expandedUncertainty: hostile,
    limit: hostile,
    rule: fc.constantFrom('simple', 'rounded', 'guarded', 'four-zone', 'other'),
    guardFactor: hostile,
    rounding,
  }),
  complementaryHue: one({ wavelengthNm: hostile }),
  convertUnit: one({ value: hostile, from: unit, to: unit, molarMass: hostile }),
  curveBand: fc.tuple(
    fc.oneof(fc.constantFrom(...fits), hostile),
    fc.oneof(
      fc.record({
        from: hostile,
        to: hostile,
        count: fc.oneof(fc.constant(3), hostile),
        confidence: hostile,
      }),
      hostile,
    ),
  ),
  diagnoseSlope: one({
    slope: hostile,
    expected: fc.oneof(
      fc.record({ molarAbsorptivity: hostile, molarMass: hostile, pathLengthCm: hostile }),
      hostile,
    ),
    tolerancePercent: hostile,
  }),
  expectedConcentration: one({ absorbance: hostile, slope: hostile }),
  expectedSlope: one({ molarAbsorptivity: hostile, molarMass: hostile, pathLengthCm: hostile }),
  holdTime: one({
    collectedAt: instant,
    preservation,
    rule: fc.oneof(
      fc.record({
        hours: hostile,
        conditions: fc.array(
          fc.record({
            preservation: fc.constantFrom('nitric-acid', 'none'),
            hours: hostile,
            minPH: hostile,
            maxPH: hostile,
            maxTemperatureC: hostile,
          }),
          { maxLength: 2 },
        ),
        soonWithinHours: hostile,
      }),
      hostile,
    ),
    at: instant,
  }),
  molarAbsorptivity: one({ slope: hostile, molarMass: hostile, pathLengthCm: hostile }),
  ownColour: one({ dElectrons: hostile }),
  percentile90: one({
    values: fc.oneof(list, hostile),
    whenFractional: fc.constantFrom('interpolate', 'round-up', 'round-to-nearest', 'other'),
    smallSets: fc.constantFrom('federal', 'mean-of-two-highest-below-10', undefined, 'other'),
  }),
  readableRange: fc.tuple(hostile, fc.oneof(fc.record({ low: hostile, high: hostile }), hostile)),
  reportValue: one({
    concentration: hostile,
    expandedUncertainty: hostile,
    limits: fc.oneof(
      fc.record({ detection: hostile, quantification: hostile, practicalQuantification: hostile }),
      hostile,
    ),
    nonDetect: fc.constantFrom(
      'less-than-loq',
      'less-than-mdl',
      'zero',
      'half-loq',
      'half-pql',
      'as-measured',
      'other',
    ),
    rounding,
    unit,
    complianceLimit: hostile,
  }),
  roundReported: fc.tuple(hostile, rounding),
  runningAnnualAverage: one({
    quarters: fc.oneof(
      fc.array(
        fc.record({ quarter: fc.constantFrom('2026-Q1', '2026-Q2', '2027-Q1', 1, null), results: list }),
        {
          maxLength: 5,
        },
      ),
      hostile,
    ),
    limit: hostile,
    rounding,
  }),
  solutionColour: one({
    band: fc.oneof(fc.record({ peakNm: hostile, widthShortNm: hostile, widthLongNm: hostile }), hostile),
    absorbance: hostile,
  }),
  transitionEnergy: one({ wavelengthNm: hostile }),
}

describe.each(Object.keys(inputs))('%s', (name) => {
  it('answers with finite numbers or refuses', () => {
    fc.assert(
      fc.property(inputs[name] ?? fc.constant([]), (args) => refusesOrAnswers(name, args)),
      { numRuns: 2000 },
    )
  })

  it('refuses nonsense of any shape', () => {
    fc.assert(
      fc.property(fc.array(fc.anything(), { maxLength: 3 }), (args) => refusesOrAnswers(name, args)),
      { numRuns: 500 },
    )
  })
})
