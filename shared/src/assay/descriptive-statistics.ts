import { requireArray, requireFinite } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { ExactSum, exactSum, powerOfTwoOf } from './double-double.js'
import { gate } from './finite-gate.js'
import { ENGINE_VERSION } from './version.js'

/**
 * Mean and standard deviation (n - 1) of finite numbers, already checked; deviation 0 for one value.
 *
 * Sums run in double-double on values scaled by a power of two and taken from the mean. simple-statistics' two-pass
 * `sampleStandardDeviation` is as good on most sets but keeps only 9 digits on NIST's NumAcc2 and Michelso
 * (descriptive-statistics.spec.ts compares them), because its mean is rounded before the second pass.
 */
export function describeSample(values: readonly number[]): {
  n: number
  mean: number
  standardDeviation: number
} {
  const n = values.length
  const scale = powerOfTwoOf(values.reduce((most, value) => Math.max(most, Math.abs(value)), 0))
  const scaled = values.map((value) => value / scale)
  const centre = exactSum(scaled) / n
  const deviations = new ExactSum()
  const squares = new ExactSum()
  const difference = new ExactSum()
  for (const value of scaled) {
    difference.set(value).add(-centre)
    deviations.add(difference.hi, difference.lo)
    squares.addProduct(difference.hi, difference.lo, difference.hi, difference.lo)
  }
  // the mean was rounded: what the deviations still sum to corrects the squares (Chan, Golub and LeVeque 1983)
  const left = deviations.value
  squares.addProduct(-left, 0, left / n, 0)
  const standardDeviation = n > 1 ? Math.sqrt(Math.max(0, squares.value) / (n - 1)) * scale : 0
  return { n, mean: (centre + left / n) * scale, standardDeviation }
}

export function requireValues(values: readonly number[], least: number, what = 'values'): number[] {
  const list = Array.from(requireArray(values, what), (value, index) => requireFinite(value, 'value', index) + 0)
  if (list.length >= least) return list
  throw new AssayError('too-few-values', `At least ${least} ${what} are needed.`)
}

export interface DescriptiveStatistics {
  n: number
  mean: number
  standardDeviation: number
  /** s / sqrt(n) */
  standardErrorOfMean: number
  /** null for a mean of zero */
  relativeStandardDeviationPercent: number | null
  /** lag 1; null where the values do not vary */
  autocorrelation: number | null
  minimum: number
  maximum: number
  median: number
  engineVersion: string
  method: string
}

/**
 * Mean, standard deviation (n - 1), lag-1 autocorrelation, median and ends of at least two values, in their unit.
 *
 * Source: NIST/SEMATECH e-Handbook 1.3.5.1, 1.3.5.6 and 1.3.5.12; agrees with the certified digits of the NIST
 * Statistical Reference Datasets, univariate.
 *
 * @throws AssayError too-few-values, non-finite, numerical-overflow
 */
export function descriptiveStatistics(values: readonly number[]): DescriptiveStatistics {
  const list = requireValues(values, 2)
  const { n, mean, standardDeviation } = describeSample(list)
  const sorted = list.toSorted((a, b) => a - b)
  const low = sorted[Math.floor((n - 1) / 2)] ?? 0
  const high = sorted[Math.ceil((n - 1) / 2)] ?? 0
  const relative = (100 * standardDeviation) / Math.abs(mean)
  return gate({
    n,
    mean,
    standardDeviation,
    standardErrorOfMean: standardDeviation / Math.sqrt(n),
    relativeStandardDeviationPercent: Number.isFinite(relative) ? relative : null,
    autocorrelation: autocorrelation(list),
    minimum: sorted[0] ?? 0,
    maximum: sorted.at(-1) ?? 0,
    median: low / 2 + high / 2,
    engineVersion: ENGINE_VERSION,
    method: 'NIST/SEMATECH e-Handbook 1.3.5',
  })
}

function autocorrelation(values: readonly number[]): number | null {
  const scale = powerOfTwoOf(values.reduce((most, value) => Math.max(most, Math.abs(value)), 0))
  const scaled = values.map((value) => value / scale)
  const mean = exactSum(scaled) / scaled.length
  const below = new ExactSum()
  const above = new ExactSum()
  let before = 0
  scaled.forEach((value, i) => {
    const deviation = value - mean
    below.addProduct(deviation, 0, deviation, 0)
    if (i > 0) above.addProduct(deviation, 0, before, 0)
    before = deviation
  })
  return below.value > 0 ? above.value / below.value : null
}
