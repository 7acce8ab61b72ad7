import {
  finiteResult,
  requireArray,
  requireFinite,
  requireNotNegative,
  requireObject,
  requireOneOf,
} from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { Decimal } from './decimal.js'
import { requireRounding, roundDecimal, type Rounding } from './rounding.js'

export interface Percentile90Input {
  /** all results of the period, one unit, non-detects already replaced by the programme's rule */
  values: readonly number[]
  whenFractional: 'interpolate' | 'round-up' | 'round-to-nearest'
  /** 'federal' when left out */
  smallSets?: 'federal' | 'mean-of-two-highest-below-10'
}

/**
 * The 90th percentile of tap samples by 40 CFR 141.80(c)(3) (2015 text; check the current one).
 *
 * Results are sorted upwards and numbered from 1; the result with number 0.9 n is the percentile. Five samples:
 * the mean of ranks 4 and 5. Fewer than five: the highest.
 *
 * The federal text is silent where 0.9 n is not whole (n = 15 gives 13.5): States interpolate between the
 * neighbours, take the next rank, or the nearest (an exact half goes up); `whenFractional` says which. One State
 * handout averages the two highest for any n below 10, against the federal mean-of-two for five alone:
 * `smallSets` says which.
 *
 * @returns value, the rank it stands at (4.5 for the mean of ranks 4 and 5), n, the rule in words
 * @throws AssayError too-few-values: none; non-finite with the index
 */
export function percentile90(input: Percentile90Input) {
  requireObject(input, 'results for the percentile')
  const whenFractional = requireOneOf(
    input.whenFractional,
    ['interpolate', 'round-up', 'round-to-nearest'],
    'rule for a fractional rank',
  )
  const smallSets = requireOneOf(
    input.smallSets ?? 'federal',
    ['federal', 'mean-of-two-highest-below-10'],
    'rule for small sets',
  )
  const given = requireArray(input.values, 'results')
  const sorted = Array.from(given, (value, index) => requireFinite(value, 'result', index)).sort(
    (a, b) => a - b,
  )
  const n = sorted.length
  if (n === 0) throw new AssayError('too-few-values', 'There is no result to take the 90th percentile of.')

  const at = (rank: number) => {
    const low = sorted[Math.floor(rank) - 1] ?? 0
    const high = sorted[Math.ceil(rank) - 1] ?? low
    // decimal, so that the mean of 1.2 and 1.4 is 1.3 and not a hair below the action level
    const fraction = new Decimal(rank).minus(Math.floor(rank))
    return finiteResult(new Decimal(high).minus(low).mul(fraction).plus(low).toNumber(), '90th percentile')
  }
  const answer = (rank: number, rule: string) => ({
    value: at(rank),
    rank,
    n,
    rule,
    method: '40 CFR 141.80(c)(3)',
  })

  if (smallSets === 'mean-of-two-highest-below-10' && n > 1 && n < 10) {
    return answer(n - 0.5, 'fewer than ten samples: mean of the two highest (State rule)')
  }
  if (n < 5) return answer(n, 'fewer than five samples: the highest')
  if (n === 5) return answer(4.5, 'five samples: mean of ranks 4 and 5')
  const rank = (9 * n) / 10
  if ((9 * n) % 10 === 0) return answer(rank, `rank ${rank} of ${n}`)
  if (whenFractional === 'round-up') return answer(Math.ceil(rank), `rank ${rank} of ${n}, taken up`)
  if (whenFractional === 'round-to-nearest') {
    return answer(Math.floor(rank + 0.5), `rank ${rank} of ${n}, taken to the nearest`)
  }
  return answer(rank, `rank ${rank} of ${n}, interpolated`)
}

export interface RunningAnnualAverageInput {
  /** one entry a quarter; an empty list is a quarter that passed without a sample */
  quarters: readonly { quarter: string | number; results: readonly number[] }[]
  /** same unit as the results */
  limit: number
  /** mean of the quarters' means when left out; or every result counts alike */
  averaging?: 'quarter-means' | 'all-results'
  /** rounds the average once before it is compared; unrounded when left out */
  rounding?: Rounding | undefined
}

interface Quarter {
  label: string
  order: number
  results: number[]
}

/** '2026-Q1' orders by calendar, anything else by the order given. */
function readQuarters(input: RunningAnnualAverageInput): Quarter[] {
  const seen = new Set<string>()
  const quarters = Array.from(requireArray(input.quarters, 'quarters'), (entry, index) => {
    requireObject(entry, 'quarter')
    if (typeof entry.quarter !== 'string' && typeof entry.quarter !== 'number') {
      throw new AssayError('invalid-argument', 'Name each quarter, for example 2026-Q1.', index)
    }
    const label = String(entry.quarter)
    if (seen.has(label))
      throw new AssayError('invalid-argument', `The quarter ${label} stands there twice.`, index)
    seen.add(label)
    const results = Array.from(requireArray(entry.results, 'results of a quarter'), (value) =>
      requireFinite(value, 'result', index),
    )
    const calendar = /^(\d{4})-?Q([1-4])$/.exec(label)
    return {
      label,
      order: calendar ? Number(calendar[1]) * 4 + Number(calendar[2]) - 1 : Number.NaN,
      results,
    }
  })
  const isCalendar = quarters.every((quarter) => !Number.isNaN(quarter.order))
  if (!isCalendar) return quarters.map((quarter, order) => ({ ...quarter, order })).slice(-4)
  quarters.sort((a, b) => a.order - b.order)
  const last = quarters.at(-1)?.order ?? 0
  return quarters.filter((quarter) => quarter.order > last - 4)
}

/** Decimal, so that the mean of three times 0.1 is 0.1 and does not tip over a limit of 0.1. */
function mean(values: readonly number[]): number {
  return values
    .reduce((sum, value) => sum.plus(value), new Decimal(0))
    .div(values.length)
    .toNumber()
}

/**
 * The running annual average at one sampling point, 40 CFR 141.23(i)(1) (2015 text; check the current one).
 *
 * The last four quarters count. Quarters without a sample are left out: the average is over those collected.
 * Results below the detection limit come in as zero (141.23(i)(1)) or by the programme's own rule.
 *
 * A single high result that forces the average over the limit whatever the missing quarters bring counts at
 * once: `certainAlready` assumes zero for every quarter of the year still to come.
 *
 * The field disagrees twice, so both are arguments: the mean of the quarters' means against the mean of all results
 * (`averaging`), and the average unrounded against rounded to the limit's digits (EPA WSG 21; `rounding`).
 *
 * @returns average (unrounded), quartersUsed, exceeds (average above the limit), certainAlready, quarters with
 *          their means
 * @throws AssayError too-few-values: no result in any quarter; non-finite; invalid-argument: a quarter twice
 */
export function runningAnnualAverage(input: RunningAnnualAverageInput) {
  requireObject(input, 'running annual average')
  const limit = requireNotNegative(input.limit, 'limit')
  const averaging = requireOneOf(
    input.averaging ?? 'quarter-means',
    ['quarter-means', 'all-results'],
    'way of averaging',
  )
  const rounding = input.rounding === undefined ? null : requireRounding(input.rounding)
  const window = readQuarters(input)
  const sampled = window.filter((quarter) => quarter.results.length > 0)
  if (sampled.length === 0) {
    throw new AssayError('too-few-values', 'There is no result in these quarters to average.')
  }
  const means = sampled.map((quarter) => finiteResult(mean(quarter.results), 'mean of a quarter'))
  const average = finiteResult(
    mean(averaging === 'quarter-means' ? means : sampled.flatMap((quarter) => quarter.results)),
    'running annual average',
  )
  const isOver = (value: number) => {
    const exact = new Decimal(value)
    return (rounding === null ? exact : roundDecimal(exact, rounding)).gt(limit)
  }
  const span =
    Math.max(...window.map((quarter) => quarter.order)) -
    Math.min(...window.map((quarter) => quarter.order)) +
    1
  const stillToCome = 4 - span
  // each quarter still to come adds a zero: a mean for 'quarter-means', one result for 'all-results'
  const counted =
    averaging === 'quarter-means' ? means.length : sampled.flatMap((quarter) => quarter.results).length
  const least = new Decimal(average)
    .mul(counted)
    .div(counted + stillToCome)
    .toNumber()
  return {
    average,
    quartersUsed: sampled.length,
    exceeds: isOver(average),
    certainAlready: isOver(finiteResult(least, 'least possible average')),
    leastPossibleAverage: finiteResult(least, 'least possible average'),
    quarters: sampled.map((quarter, index) => ({
      quarter: quarter.label,
      n: quarter.results.length,
      mean: means[index] ?? 0,
    })),
    method: `40 CFR 141.23(i), ${averaging === 'quarter-means' ? "mean of the quarters' means" : 'mean of all results'}`,
  }
}
