import { requireObject } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { requireValues } from './descriptive-statistics.js'
import { dixonQuantile, dixonTail, printedDixonCritical } from './dixon-critical-values.js'
import { requireProbability } from './distributions.js'
import { gate } from './finite-gate.js'
import { requireSides, type OutlierTest } from './outlier-tests.js'
import { ENGINE_VERSION } from './version.js'

export interface DixonTest extends OutlierTest {
  q: number
  sides: 1 | 2
  gap: number
  range: number
  criticalSource: 'printed' | 'computed'
}

/**
 * Dixon's Q test (ratio r10) for one outlier at an end: Q = gap / range.
 *
 * The end with the larger gap is tested. Two-sided critical values are Rorabacher's printed ones where the table has
 * them (n = 3 to 20 at 0.10, 0.05 and 0.01; one-sided at half of these), elsewhere computed from the distribution of
 * r10. Beware of older tables: Dean and Dixon's Q 0.90 is the one-sided 0.05 value. The probability is computed,
 * twice the one-sided tail for two sides, at most 1.
 *
 * Sources: Dean and Dixon, Anal. Chem. 23 (1951) 636; Rorabacher, Anal. Chem. 63 (1991) 139.
 *
 * @param values  3 to 30
 * @param options alpha 0.05 and sides 2 when left out
 * @throws AssayError too-few-values, invalid-argument (more than 30), no-spread, invalid-probability, non-finite
 */
export function dixonTest(
  values: readonly number[],
  options: { alpha?: number | undefined; sides?: 1 | 2 | undefined } = {},
): DixonTest {
  requireObject(options, 'options')
  const alpha = requireProbability(options.alpha ?? 0.05, 'significance level')
  const sides = requireSides(options.sides)
  const list = requireValues(values, 3)
  const n = list.length
  if (n > 30) throw new AssayError('invalid-argument', "Dixon's test is for 3 to 30 values.")
  const order = list.map((_, i) => i).sort((a, b) => (list[a] ?? 0) - (list[b] ?? 0))
  const at = (rank: number) => list[order.at(rank) ?? 0] ?? 0
  const scaled = (from: number, to: number) => at(to) / 2 - at(from) / 2
  const halfRange = scaled(0, -1)
  if (!(halfRange > 0)) throw new AssayError('no-spread', 'All values are equal: none can be an outlier.')
  const lowGap = scaled(0, 1)
  const highGap = scaled(-2, -1)
  const isHigh = highGap >= lowGap
  const gap = isHigh ? highGap : lowGap
  const q = gap / halfRange
  const twoSidedAlpha = sides === 2 ? alpha : 2 * alpha
  const printed = printedDixonCritical(n, twoSidedAlpha)
  const critical = printed ?? dixonQuantile(twoSidedAlpha / 2, n)
  return gate({
    q,
    critical,
    index: order.at(isHigh ? -1 : 0) ?? 0,
    value: at(isHigh ? -1 : 0),
    outlier: q > critical,
    probability: Math.min(1, sides * dixonTail(q, n)),
    alpha,
    sides,
    gap: 2 * gap,
    range: 2 * halfRange,
    criticalSource: printed === undefined ? 'computed' : 'printed',
    engineVersion: ENGINE_VERSION,
    method: `Dixon's Q test, r10, ${sides === 2 ? 'two-sided' : 'one-sided'} (Rorabacher 1991)`,
  })
}
