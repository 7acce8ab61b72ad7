import { requireObject } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { describeSample, requireValues } from './descriptive-statistics.js'
import { requireProbability, tUpperProbability, tUpperQuantile } from './distributions.js'
import { gate } from './finite-gate.js'
import { ENGINE_VERSION } from './version.js'

export interface OutlierTest {
  /** position of the suspect value, from 0 */
  index: number
  value: number
  critical: number
  outlier: boolean
  probability: number
  alpha: number
  engineVersion: string
  method: string
}

export interface GrubbsTest extends OutlierTest {
  g: number
  sides: 1 | 2
  mean: number
  standardDeviation: number
}

export function requireSides(value: unknown): 1 | 2 {
  if (value === undefined || value === 2) return 2
  if (value === 1) return 1
  throw new AssayError('invalid-argument', 'A test has 1 or 2 sides.')
}

function requireVariation(standardDeviation: number): void {
  if (standardDeviation > 0) return
  throw new AssayError('no-spread', 'All values are equal: none can be an outlier.')
}

/** Largest |x - mean| / s among the values still in play, and its tail probability on one side. */
function extremeDeviate(values: readonly number[]) {
  const n = values.length
  const { mean, standardDeviation } = describeSample(values)
  requireVariation(standardDeviation)
  let position = 0
  values.forEach((value, i) => {
    if (Math.abs(value - mean) > Math.abs((values[position] ?? 0) - mean)) position = i
  })
  const value = values[position] ?? 0
  const g = Math.abs(value - mean) / standardDeviation
  // t^2 = (n-2) (1-r) / r with r the share of the squares left without the suspect: the same as
  // n (n-2) g^2 / ((n-1)^2 - n g^2), whose denominator cancels where g is near its greatest value
  const rest = describeSample(values.filter((_, i) => i !== position)).standardDeviation
  const ratio = rest / standardDeviation
  const share = (ratio * ratio * (n - 2)) / (n - 1)
  const t = Math.sqrt(((n - 2) * Math.max(0, 1 - share)) / share)
  const tail = Number.isFinite(t) ? tUpperProbability(t, n - 2) : 0
  return { position, value, mean, standardDeviation, g, tail }
}

function criticalDeviate(n: number, tail: number): number {
  const t = tUpperQuantile(tail, n - 2)
  return ((n - 1) / Math.sqrt(n)) * (t / Math.sqrt(n - 2 + t * t))
}

/**
 * Grubbs' test for a single outlier, the value furthest from the mean.
 *
 * G = |x - mean| / s against (n-1)/sqrt(n) sqrt(t^2 / (n-2+t^2)), t the upper alpha/(2n) quantile for two sides,
 * alpha/n for one, with n-2 degrees of freedom. The probability is Bonferroni's, 2n or n times the tail, at most 1.
 *
 * Sources: Grubbs, Technometrics 11 (1969) 1; ISO 5725-2:1994 section 7.3.4 (its 5 % and 1 % columns are two-sided);
 * NIST/SEMATECH e-Handbook 1.3.5.17.1.
 *
 * @param values  at least 3, any unit
 * @param options alpha 0.05 and sides 2 when left out
 * @throws AssayError too-few-values, no-spread, invalid-probability, non-finite
 */
export function grubbsTest(
  values: readonly number[],
  options: { alpha?: number | undefined; sides?: 1 | 2 | undefined } = {},
): GrubbsTest {
  requireObject(options, 'options')
  const alpha = requireProbability(options.alpha ?? 0.05, 'significance level')
  const sides = requireSides(options.sides)
  const list = requireValues(values, 3)
  const n = list.length
  const { position, value, mean, standardDeviation, g, tail } = extremeDeviate(list)
  const critical = criticalDeviate(n, alpha / (sides * n))
  return gate({
    g,
    critical,
    index: position,
    value,
    outlier: g > critical,
    probability: Math.min(1, sides * n * tail),
    alpha,
    sides,
    mean,
    standardDeviation,
    engineVersion: ENGINE_VERSION,
    method: `Grubbs' test, ${sides === 2 ? 'two-sided' : 'one-sided'} (ISO 5725-2:1994, 7.3.4)`,
  })
}

export interface GeneralizedEsdStep {
  /** extreme studentized deviate of this step */
  r: number
  critical: number
  /** position in the list given, from 0 */
  index: number
  value: number
  /** counted among the outliers */
  outlier: boolean
  probability: number
}

export interface GeneralizedEsd {
  steps: GeneralizedEsdStep[]
  outlierCount: number
  outliers: { index: number; value: number }[]
  alpha: number
  engineVersion: string
  method: string
}

/**
 * Generalized extreme studentized deviate test for up to `maxOutliers` outliers, both sides.
 *
 * Takes away the value furthest from the mean again and again; the outliers are the values up to the LAST step whose
 * deviate exceeds its critical value, even where earlier steps do not (masking). Critical value of step i:
 * (n-i) t / sqrt((n-i-1+t^2)(n-i+1)), t the upper alpha/(2(n-i+1)) quantile with n-i-1 degrees of freedom.
 *
 * Source: Rosner, Technometrics 25 (1983) 165; NIST/SEMATECH e-Handbook 1.3.5.17.3 (good for n >= 25, fair from 15);
 * ISO 16269-4:2010.
 *
 * @param options alpha 0.05; maxOutliers the smaller of 10 and half the values, when left out
 * @throws AssayError too-few-values (3, and two more than maxOutliers), no-spread, invalid-argument
 */
export function generalizedEsd(
  values: readonly number[],
  options: { alpha?: number | undefined; maxOutliers?: number | undefined } = {},
): GeneralizedEsd {
  requireObject(options, 'options')
  const alpha = requireProbability(options.alpha ?? 0.05, 'significance level')
  const list = requireValues(values, 3)
  const maxOutliers =
    options.maxOutliers ?? Math.max(1, Math.min(10, Math.floor(list.length / 2), list.length - 2))
  if (!Number.isInteger(maxOutliers) || maxOutliers < 1) {
    throw new AssayError('invalid-argument', 'The greatest number of outliers must be a whole number from 1.')
  }
  if (maxOutliers > list.length - 2) {
    throw new AssayError('too-few-values', `${maxOutliers} outliers need at least ${maxOutliers + 2} values.`)
  }
  const left = list.map((value, index) => ({ value, index }))
  requireVariation(describeSample(list).standardDeviation)
  const found: Omit<GeneralizedEsdStep, 'outlier'>[] = []
  while (found.length < maxOutliers) {
    const remaining = left.map((entry) => entry.value)
    if (!(describeSample(remaining).standardDeviation > 0)) break
    const n = remaining.length
    const { position, value, g, tail } = extremeDeviate(remaining)
    const index = left[position]?.index ?? 0
    left.splice(position, 1)
    found.push({
      r: g,
      critical: criticalDeviate(n, alpha / (2 * n)),
      index,
      value,
      probability: Math.min(1, 2 * n * tail),
    })
  }
  const outlierCount = found.findLastIndex((step) => step.r > step.critical) + 1
  const steps = found.map((step, i) => ({ ...step, outlier: i < outlierCount }))
  return gate({
    steps,
    outlierCount,
    outliers: steps.slice(0, outlierCount).map(({ index, value }) => ({ index, value })),
    alpha,
    engineVersion: ENGINE_VERSION,
    method: 'Generalized ESD test (Rosner 1983)',
  })
}
