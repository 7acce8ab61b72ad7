import { mean, median, sampleStandardDeviation } from 'simple-statistics'
import { requireArray, requireFinite } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { ExactSum, powerOfTwoOf } from './double-double.js'
import { gate } from './finite-gate.js'
import { ENGINE_VERSION } from './version.js'

/**
 * Mean and standard deviation (n - 1) of finite numbers, already checked; deviation 0 for one value.
 *
 * simple-statistics sums the mean with compensation and takes the squares from the mean, which keeps 13 digits or
 * more on NIST's univariate sets (cases nist-univariate). Scaling by a power of two changes no digit and keeps the squares
 * of huge and tiny values within range.
 */
export function describeSample(values: readonly number[]): {
  n: number
  mean: number
  standardDeviation: number
} {
  const n = values.length
  const scale = powerOfTwoOf(largestOf(values))
  const scaled = values.map((value) => value / scale)
  const standardDeviation = n > 1 ? sampleStandardDeviation(scaled) * scale : 0
  return { n, mean: mean(scaled) * scale, standardDeviation }
}

/** Largest absolute value; 0 for an empty list. */
export function largestOf(values: readonly number[]): number {
  return values.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
}

export function requireValues(values: readonly number[], least: number, what = 'values'): number[] {
  const list = Array.from(
    requireArray(values, what),
    (value, index) => requireFinite(value, 'value', index) + 0,
  )
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
  const sample = describeSample(list)
  const { n, standardDeviation } = sample
  const scale = powerOfTwoOf(largestOf(list))
  const scaled = list.map((value) => value / scale)
  const relative = (100 * standardDeviation) / Math.abs(sample.mean)
  return gate({
    n,
    mean: sample.mean,
    standardDeviation,
    standardErrorOfMean: standardDeviation / Math.sqrt(n),
    relativeStandardDeviationPercent: Number.isFinite(relative) ? relative : null,
    autocorrelation: autocorrelation(scaled),
    minimum: Math.min(...list),
    maximum: Math.max(...list),
    median: median(scaled) * scale,
    engineVersion: ENGINE_VERSION,
    method: 'NIST/SEMATECH e-Handbook 1.3.5',
  })
}

/** Of values already scaled, so that their squares neither overflow nor vanish. */
function autocorrelation(scaled: readonly number[]): number | null {
  const centre = mean([...scaled])
  const below = new ExactSum()
  const above = new ExactSum()
  let before = 0
  scaled.forEach((value, i) => {
    const deviation = value - centre
    below.addProduct(deviation, 0, deviation, 0)
    if (i > 0) above.addProduct(deviation, 0, before, 0)
    before = deviation
  })
  return below.value > 0 ? above.value / below.value : null
}
