import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { AssayError } from './assay-error.js'
import { CALIBRATION_MODELS, fitCalibration } from './fit-calibration.js'
import { WEIGHTINGS } from './calibration-weights.js'
import { RUN_RULES } from './run-rules.js'
import { validationFunctions } from './validation-functions.js'

/* No NaN or Infinity leaves a statistical function, and nothing but an AssayError is thrown, whatever comes in. */

function badNumbers(value: unknown, path = 'result'): string[] {
  if (typeof value === 'number')
    return Number.isFinite(value) && !Object.is(value, -0) ? [] : [`${path}: ${value}`]
  if (typeof value !== 'object' || value === null) return []
  return Object.entries(value).flatMap(([key, part]) => badNumbers(part, `${path}.${key}`))
}

function freeze(value: unknown): unknown {
  if (typeof value !== 'object' || value === null) return value
  Object.values(value).forEach(freeze)
  return Object.freeze(value)
}

function call(name: string, args: readonly unknown[]): unknown {
  const compute = validationFunctions[name]
  if (compute === undefined) throw new Error(`no function ${name}`)
  try {
    // frozen: a function that changed its input would throw a TypeError here
    return compute(...args.map(freeze))
  } catch (error) {
    if (!(error instanceof AssayError)) throw error
    expect(error.message.length).toBeGreaterThan(10)
    return undefined
  }
}

const extreme = fc.constantFrom(
  0,
  -0,
  1,
  -1,
  Number.MAX_VALUE,
  -Number.MAX_VALUE,
  Number.MIN_VALUE,
  1e308,
  1e-308,
  1e-300,
  1e200,
  1e-200,
  1e154,
  1e-160,
)
const finite = fc.oneof(
  { weight: 3, arbitrary: fc.double({ noNaN: true, noDefaultInfinity: true }) },
  { weight: 3, arbitrary: fc.double({ min: -5, max: 100, noNaN: true }) },
  { weight: 2, arbitrary: fc.constantFrom(0.1, 0.2, 0.3, 1e-4, 1e7, 3) },
  { weight: 2, arbitrary: extreme },
)
const notNumber = fc.constantFrom(NaN, Infinity, -Infinity, undefined, null, '', '1', '1,5', [], {}, true)
const hostile = fc.oneof({ weight: 20, arbitrary: finite }, { weight: 1, arbitrary: notNumber })
const positive = fc.oneof(
  fc.double({ min: 0, noNaN: true, noDefaultInfinity: true }),
  fc.double({ min: 0, max: 9, noNaN: true }),
  hostile,
)
const probability = fc.oneof(fc.constantFrom(0.05, 0.01, 0.95), fc.double({ min: 0, max: 1 }), hostile)
const list = fc.array(hostile, { maxLength: 14 })
const plainList = fc.array(finite, { maxLength: 14 })
const tame = fc.array(fc.double({ min: -2, max: 5, noNaN: true }), { maxLength: 14 })
const values = fc.oneof(list, plainList, tame, notNumber)
const groups = fc.oneof(
  fc.array(fc.oneof(list, fc.tuple(finite, finite), fc.tuple(finite, finite, finite)), { maxLength: 6 }),
  fc.array(fc.tuple(finite, finite), { maxLength: 6 }),
  notNumber,
)
const option = <T>(arbitrary: fc.Arbitrary<T>) => fc.oneof(fc.constant(undefined), arbitrary)

const points = (x: string, y: string, weight?: string) =>
  fc.oneof(
    fc.array(fc.record({ [x]: hostile, [y]: hostile, ...(weight ? { [weight]: option(positive) } : {}) }), {
      maxLength: 12,
    }),
    fc.array(fc.record({ [x]: fc.double({ min: 0, max: 5, noNaN: true }), [y]: finite }), { maxLength: 12 }),
    fc.array(
      fc.record({ [x]: fc.constantFrom(0, 1, 2, 3, 4, 5), [y]: fc.double({ min: 0, max: 2, noNaN: true }) }),
      {
        minLength: 4,
        maxLength: 12,
      },
    ),
    notNumber,
  )
const curve = fc.oneof(points('x', 'y'), points('concentration', 'absorbance'))
const calibration = fc.record({
  points: points('concentration', 'absorbance', 'weight'),
  model: fc.constantFrom(...CALIBRATION_MODELS),
  weighting: option(fc.constantFrom(...WEIGHTINGS)),
})

/** A fit that worked, one whose numbers were spoiled, or none. */
const fit = fc.oneof(
  calibration.map((input) => call('fitCalibration', [input])),
  fc
    .tuple(
      fc.constantFrom(...CALIBRATION_MODELS),
      fc.array(fc.double({ min: 0, max: 2, noNaN: true }), { minLength: 6, maxLength: 6 }),
    )
    .map(([model, y]) =>
      call('fitCalibration', [
        { points: y.map((a, i) => ({ concentration: i, absorbance: i * 0.2 + a / 20 })), model },
      ]),
    ),
  fc
    .tuple(
      hostile,
      fc.constantFrom(
        'centred',
        'range',
        'residualStandardDeviation',
        'degreesOfFreedom',
        'n',
        'weightScale',
        'readBack',
        'model',
      ),
    )
    .map(([bad, key]) => ({
      ...fitCalibration({
        points: [0, 1, 2, 3, 4].map((c) => ({ concentration: c, absorbance: 0.1 * c + 0.001 * (c % 2) })),
        model: 'quadratic',
      }),
      [key]: bad,
    })),
  hostile,
)
const limitOptions = {
  alpha: option(probability),
  beta: option(probability),
  readings: option(fc.oneof(fc.integer({ min: 1, max: 9 }), hostile)),
  k: option(positive),
}
const significance = fc.oneof(
  fc.constant(undefined),
  fc.record({ alpha: option(probability), sides: fc.constantFrom(1, 2, 3, undefined) }),
  notNumber,
)
const df = fc.oneof(fc.integer({ min: 1, max: 200 }), hostile)
const score = (...keys: string[]) =>
  fc.tuple(fc.record(Object.fromEntries(keys.map((key) => [key, hostile]))))
const constants = option(fc.constantFrom('exact', 'printed', 'other'))

/** One row a function: how its arguments are made. Add a row for every function added. */
const FUNCTIONS: Record<string, fc.Arbitrary<readonly unknown[]>> = {
  fitPolynomial: fc.tuple(
    points('x', 'y', 'weight'),
    fc.oneof(fc.integer({ min: 0, max: 13 }), hostile),
    option(fc.record({ throughOrigin: fc.boolean() })),
  ),
  fitCalibration: fc.tuple(fc.oneof(calibration, notNumber)),
  predictConcentration: fc.tuple(
    fit,
    fc.record({
      absorbances: fc.oneof(values, fc.tuple(fc.double({ min: -1, max: 2, noNaN: true }))),
      confidence: option(probability),
      responseWeight: option(positive),
    }),
  ),
  detectionLimits: fc.tuple(fit, option(fc.record(limitOptions))),
  detectionLimitsFromBlanks: fc.tuple(fc.record({ blanks: values, slope: hostile, ...limitOptions })),
  mandelTest: fc.tuple(curve),
  lackOfFitTest: fc.tuple(curve, option(fc.oneof(fc.integer({ min: 0, max: 4 }), hostile))),
  slopeComparison: fc.tuple(
    fit,
    fit,
    option(fc.record({ variances: fc.constantFrom('pooled', 'separate', 'other') })),
  ),
  standardAddition: fc.tuple(
    fc.oneof(points('added', 'absorbance'), curve),
    option(fc.record({ confidence: option(probability) })),
  ),
  descriptiveStatistics: fc.tuple(values),
  recoveryPercent: score('found', 'expected'),
  spikeRecoveryPercent: score('spiked', 'unspiked', 'added'),
  relativePercentDifference: fc.tuple(hostile, hostile),
  absoluteDifference: fc.tuple(hostile, hostile),
  grubbsTest: fc.tuple(values, significance),
  dixonTest: fc.tuple(
    values,
    fc.oneof(
      fc.constant(undefined),
      fc.record({ alpha: fc.constantFrom(0.1, 0.05, 0.01, 0, 1, NaN), sides: fc.constantFrom(1, 2, 3) }),
    ),
  ),
  cochranTest: fc.tuple(groups, significance),
  generalizedEsd: fc.tuple(
    values,
    option(
      fc.record({
        alpha: option(probability),
        maxOutliers: option(fc.oneof(fc.integer({ min: 0, max: 15 }), hostile)),
      }),
    ),
  ),
  methodDetectionLimit: fc.tuple(
    fc.record({
      spikes: fc.oneof(values, fc.array(finite, { minLength: 7, maxLength: 9 })),
      blanks: fc.oneof(
        values,
        fc.array(fc.oneof(finite, fc.constant(null)), { minLength: 7, maxLength: 120 }),
      ),
      blankRule: option(fc.constantFrom('highest', 'percentile-99', 'other')),
      tValue: option(fc.constantFrom('exact', 'printed', 'other')),
    }),
  ),
  chartConstants: fc.tuple(fc.oneof(fc.integer({ min: 0, max: 30 }), hostile), constants),
  individualsChart: fc.tuple(
    values,
    option(
      fc.record({ sigmaFrom: option(fc.constantFrom('moving-range', 'standard-deviation')), constants }),
    ),
  ),
  meanChart: fc.tuple(
    groups,
    option(fc.record({ spread: option(fc.constantFrom('range', 'standard-deviation')), constants })),
  ),
  rangeChart: fc.tuple(groups, option(fc.record({ constants }))),
  ewmaChart: fc.tuple(
    values,
    fc.oneof(fc.record({ lambda: option(positive), target: hostile, sigma: positive }), notNumber),
  ),
  evaluateRunRules: fc.tuple(
    values,
    fc.record({
      center: hostile,
      sigma: positive,
      rules: fc.oneof(fc.subarray([...RUN_RULES]), list),
      runs: option(fc.array(fc.constantFrom(1, 2, 'a'), { maxLength: 14 })),
    }),
  ),
  combinedUncertainty: fc.tuple(
    fc.record({
      components: fc.oneof(
        fc.array(
          fc.record({ name: fc.string(), value: positive, kind: fc.constantFrom('absolute', 'relative') }),
          { maxLength: 5 },
        ),
        list,
      ),
      at: hostile,
      k: option(positive),
    }),
  ),
  topDownUncertainty: fc.tuple(
    fc.record({
      withinLabReproducibility: positive,
      biasRuns: fc.oneof(
        fc.array(
          fc.record({
            bias: hostile,
            uReference: positive,
            n: option(positive),
            standardDeviation: option(positive),
          }),
          { maxLength: 4 },
        ),
        list,
      ),
      k: option(positive),
    }),
  ),
  zScore: score('value', 'assigned', 'sigma'),
  zetaScore: score('value', 'assigned', 'uValue', 'uAssigned'),
  enNumber: score('value', 'assigned', 'expandedValue', 'expandedAssigned'),
  tUpperQuantile: fc.tuple(probability, df),
  tTwoSidedQuantile: fc.tuple(probability, df),
  fUpperQuantile: fc.tuple(probability, df, df),
  chiSquareUpperQuantile: fc.tuple(probability, df),
  normalUpperQuantile: fc.tuple(probability),
  tUpperProbability: fc.tuple(hostile, df),
  tTwoSidedProbability: fc.tuple(hostile, df),
  fUpperProbability: fc.tuple(hostile, df, df),
  chiSquareUpperProbability: fc.tuple(hostile, df),
  normalUpperProbability: fc.tuple(hostile),
}

describe('no NaN, Infinity or foreign error leaves', () => {
  it.each(Object.entries(FUNCTIONS))('%s', (name, args) => {
    let answers = 0
    fc.assert(
      fc.property(args, (given) => {
        const result = call(name, given)
        if (result !== undefined) answers += 1
        expect(badNumbers(result)).toEqual([])
      }),
      // dixonTest integrates for every probability
      { numRuns: name === 'dixonTest' ? 200 : 1000 },
    )
    // the input is not so hostile that nothing is ever computed
    expect(answers).toBeGreaterThan(5)
  })

  it.each(Object.keys(FUNCTIONS))('%s with nonsense of any shape', (name) => {
    expect(badNumbers(call(name, []))).toEqual([])
    fc.assert(
      fc.property(fc.array(fc.anything(), { maxLength: 4 }), (given) => {
        expect(badNumbers(call(name, given))).toEqual([])
      }),
      { numRuns: 300 },
    )
  })
})
