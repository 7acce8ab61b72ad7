import { requireArray, requireObject } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { describeSample, requireValues } from './descriptive-statistics.js'
import { fUpperProbability, fUpperQuantile, requireProbability } from './distributions.js'
import { gate } from './finite-gate.js'
import type { OutlierTest } from './outlier-tests.js'
import { ENGINE_VERSION } from './version.js'

export interface CochranTest extends OutlierTest {
  /** largest variance over the sum of all */
  c: number
  groups: number
  replicates: number
}

/**
 * Cochran's C test: is one group's variance too large beside the others'?
 *
 * C = s_max^2 / sum s_i^2 against 1 / (1 + (p-1) / F), F the upper alpha/p quantile with n-1 and (p-1)(n-1) degrees of
 * freedom; p groups of n results. `index` and `value` name the group with the largest variance and that variance. The
 * probability is p times the upper tail of the same F, at most 1: exact for C above 0.5, a bound below.
 *
 * Source: ISO 5725-2:1994 section 7.3.3 and table 4; 't Lam, Chemometrics 97 (2009) 157 (formula).
 *
 * @param groups  at least 2 groups of equally many results, at least 2 each
 * @param options alpha 0.05 when left out
 * @throws AssayError too-few-values, mixed-lengths, no-spread, invalid-probability, non-finite
 */
export function cochranTest(
  groups: readonly (readonly number[])[],
  options: { alpha?: number | undefined } = {},
): CochranTest {
  requireObject(options, 'options')
  const alpha = requireProbability(options.alpha ?? 0.05, 'significance level')
  const lists = Array.from(requireArray(groups, 'groups'), (group) =>
    requireValues(group, 2, 'results in each group'),
  )
  const p = lists.length
  const n = lists[0]?.length ?? 0
  if (p < 2) throw new AssayError('too-few-values', "Cochran's test needs at least 2 groups.")
  const odd = lists.findIndex((list) => list.length !== n)
  if (odd >= 0) throw new AssayError('mixed-lengths', 'Every group needs the same number of results.', odd)

  const deviations = lists.map((list) => describeSample(list).standardDeviation)
  const largest = Math.max(...deviations)
  if (!(largest > 0)) throw new AssayError('no-spread', 'No group has any spread.')
  const index = deviations.indexOf(largest)
  const others = deviations.reduce(
    (sum, s, i) => (i === index ? sum : sum + (s / largest) * (s / largest)),
    0,
  )
  const c = 1 / (1 + others)
  // (p-1) C / (1-C), without 1-C
  const f = others > 0 ? (p - 1) / others : Infinity
  const tail = Number.isFinite(f) ? fUpperProbability(f, n - 1, (p - 1) * (n - 1)) : 0
  const critical = 1 / (1 + (p - 1) / fUpperQuantile(alpha / p, n - 1, (p - 1) * (n - 1)))
  return gate({
    c,
    critical,
    index,
    value: largest * largest,
    outlier: c > critical,
    probability: Math.min(1, p * tail),
    alpha,
    groups: p,
    replicates: n,
    engineVersion: ENGINE_VERSION,
    method: "Cochran's C test (ISO 5725-2:1994, 7.3.3)",
  })
}
