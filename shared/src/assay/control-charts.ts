import {
  requireArray,
  requireFinite,
  requireObject,
  requireOneOf,
  requirePositive,
} from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { chartConstants, type ConstantsFrom } from './control-chart-constants.js'
import { describeSample, requireValues } from './descriptive-statistics.js'
import { exactSum } from './double-double.js'
import { gate } from './finite-gate.js'
import { ENGINE_VERSION } from './version.js'

export interface ControlChart {
  center: number
  /** standard deviation of the points as plotted; the limits are center +- 2 and 3 of it, and the run rules use it */
  sigma: number
  upperAction: number
  lowerAction: number
  upperWarning: number
  lowerWarning: number
  n: number
  engineVersion: string
  method: string
}

function readConstants(value: unknown): ConstantsFrom {
  return requireOneOf(value ?? 'exact', ['exact', 'printed'], 'chart constants')
}

function limits(center: number, sigma: number) {
  return {
    center,
    sigma,
    upperAction: center + 3 * sigma,
    lowerAction: center - 3 * sigma,
    upperWarning: center + 2 * sigma,
    lowerWarning: center - 2 * sigma,
  }
}

export interface IndividualsChart extends ControlChart {
  movingRangeMean: number
  standardDeviation: number
}

/**
 * Chart of single control values (X chart).
 *
 * Center is the mean; sigma the mean moving range of two over d2 (1.128), or the standard deviation of the values:
 * the field disagrees, `sigmaFrom` says which. The moving range does not widen the limits when the level drifts;
 * the standard deviation holds the between-run spread that Nordtest's control charts want.
 *
 * Sources: ISO 7870-2:2013 section 6.4 and ASTM E2587 (moving range); Nordtest TR 569, section 8 (deviation).
 * @throws AssayError too-few-values (2), non-finite, numerical-overflow
 */
export function individualsChart(
  values: readonly number[],
  options: {
    sigmaFrom?: 'moving-range' | 'standard-deviation' | undefined
    constants?: ConstantsFrom | undefined
  } = {},
): IndividualsChart {
  requireObject(options, 'options')
  const allowed = ['moving-range', 'standard-deviation'] as const
  const sigmaFrom = requireOneOf(options.sigmaFrom ?? 'moving-range', allowed, 'source of sigma')
  const { d2 } = chartConstants(2, readConstants(options.constants))
  const list = requireValues(values, 2)
  const { mean, standardDeviation } = describeSample(list)
  const ranges = list.slice(1).map((value, i) => Math.abs(value - (list[i] ?? 0)))
  const movingRangeMean = exactSum(ranges) / ranges.length
  return gate({
    ...limits(mean, sigmaFrom === 'moving-range' ? movingRangeMean / d2 : standardDeviation),
    movingRangeMean,
    standardDeviation,
    n: list.length,
    engineVersion: ENGINE_VERSION,
    method:
      sigmaFrom === 'moving-range'
        ? 'Individuals chart, moving range (ISO 7870-2)'
        : 'X chart (Nordtest TR 569)',
  })
}

function readGroups(groups: readonly (readonly number[])[], what: string): number[][] {
  const lists = Array.from(requireArray(groups, what), (group) =>
    requireValues(group, 2, 'results in each group'),
  )
  const size = lists[0]?.length
  if (size === undefined) throw new AssayError('too-few-values', `There are no ${what} to chart.`)
  const odd = lists.findIndex((list) => list.length !== size)
  if (odd >= 0) throw new AssayError('mixed-lengths', 'Every group needs the same number of results.', odd)
  return lists
}

function rangeOf(list: readonly number[]): number {
  return Math.max(...list) - Math.min(...list)
}

export interface MeanChart extends ControlChart {
  subgroupSize: number
  rangeMean: number
  /** spread of single results within a group; sigma is this over the root of the group size */
  withinSigma: number
  means: number[]
}

/**
 * Chart of the means of subgroups (Xbar chart).
 *
 * Center is the mean of the means, limits center +- A2 times the mean range, or +- 3 s / (c4 sqrt(n)) from the mean
 * standard deviation with `spread: 'standard-deviation'`. `sigma` is that of the means.
 * Sources: ISO 7870-2:2013 section 6.2; ASTM E2587.
 * @param subgroups equally many results each, 2 to 25
 * @throws AssayError too-few-values, mixed-lengths, invalid-argument, non-finite
 */
export function meanChart(
  subgroups: readonly (readonly number[])[],
  options: {
    spread?: 'range' | 'standard-deviation' | undefined
    constants?: ConstantsFrom | undefined
  } = {},
): MeanChart {
  requireObject(options, 'options')
  const spread = requireOneOf(options.spread ?? 'range', ['range', 'standard-deviation'], 'measure of spread')
  const lists = readGroups(subgroups, 'subgroups')
  const size = lists[0]?.length ?? 0
  const { d2, c4, A2 } = chartConstants(size, readConstants(options.constants))
  const samples = lists.map((list) => describeSample(list))
  const means = samples.map((sample) => sample.mean)
  const rangeMean = exactSum(lists.map(rangeOf)) / lists.length
  const deviationMean = exactSum(samples.map((sample) => sample.standardDeviation)) / lists.length
  const isRange = spread === 'range'
  const sigma = isRange ? (A2 * rangeMean) / 3 : deviationMean / (c4 * Math.sqrt(size))
  return gate({
    ...limits(describeSample(means).mean, sigma),
    subgroupSize: size,
    rangeMean,
    withinSigma: isRange ? rangeMean / d2 : deviationMean / c4,
    means,
    n: lists.length,
    engineVersion: ENGINE_VERSION,
    method: `Mean chart, ${isRange ? 'mean range' : 'mean standard deviation'} (ISO 7870-2)`,
  })
}

export interface RangeChart extends ControlChart {
  subgroupSize: number
  /** standard deviation of repeatability, mean range over d2 */
  repeatability: number
  ranges: number[]
}

/**
 * Chart of the ranges of duplicates or larger groups (R chart).
 *
 * Center is the mean range, action limits D3 and D4 times it, warning limits center +- 2 d3/d2 times it, never below
 * zero. For pairs the upper ones are 3.267 and 2.511 times the mean range.
 * Sources: ISO 7870-2:2013 section 6.2; Nordtest TR 569, section 8; ASTM E2587.
 * @param pairs duplicates, or groups of equally many results, 2 to 25
 * @throws AssayError too-few-values, mixed-lengths, invalid-argument, non-finite
 */
export function rangeChart(
  pairs: readonly (readonly number[])[],
  options: { constants?: ConstantsFrom | undefined } = {},
): RangeChart {
  requireObject(options, 'options')
  const lists = readGroups(pairs, 'pairs')
  const size = lists[0]?.length ?? 0
  const { d2, d3, D3, D4 } = chartConstants(size, readConstants(options.constants))
  const ranges = lists.map(rangeOf)
  const center = exactSum(ranges) / ranges.length
  const sigma = (d3 / d2) * center
  return gate({
    center,
    sigma,
    upperAction: D4 * center,
    lowerAction: D3 * center,
    upperWarning: center + 2 * sigma,
    lowerWarning: Math.max(0, center - 2 * sigma),
    subgroupSize: size,
    repeatability: center / d2,
    ranges,
    n: lists.length,
    engineVersion: ENGINE_VERSION,
    method: 'Range chart (ISO 7870-2)',
  })
}

export interface EwmaChart extends ControlChart {
  lambda: number
  target: number
  /** standard deviation of single values, as given */
  valueSigma: number
  /** the weighted average after each value and the action limits that hold there */
  points: { value: number; upperAction: number; lowerAction: number; isOutside: boolean }[]
}

/**
 * Exponentially weighted moving average chart, for small lasting shifts.
 *
 * z_i = lambda x_i + (1 - lambda) z_(i-1), z_0 the target. Limits target +- 3 sigma
 * sqrt(lambda / (2 - lambda) (1 - (1 - lambda)^(2 i))) at each point; `upperAction` and the others are those
 * they settle at, `sigma` the settled standard deviation of z.
 * Sources: ISO 7870-6:2016; NIST/SEMATECH e-Handbook 6.3.2.4; Roberts, Technometrics 1 (1959) 239.
 * @param options lambda above 0 up to 1 (0.2 when left out), target, sigma of single values above 0
 * @throws AssayError too-few-values (1), invalid-argument, non-finite
 */
export function ewmaChart(
  values: readonly number[],
  options: { lambda?: number | undefined; target: number; sigma: number },
): EwmaChart {
  requireObject(options, 'options')
  const lambda = requirePositive(options.lambda ?? 0.2, 'weight lambda')
  if (lambda > 1) throw new AssayError('invalid-argument', 'The weight lambda lies above 0 and at most at 1.')
  const target = requireFinite(options.target, 'target')
  const valueSigma = requirePositive(options.sigma, 'standard deviation')
  const list = requireValues(values, 1)
  const settled = valueSigma * Math.sqrt(lambda / (2 - lambda))
  let average = target
  let forgotten = 1
  const points = list.map((value) => {
    average = lambda * value + (1 - lambda) * average
    forgotten *= (1 - lambda) * (1 - lambda)
    const sigma = settled * Math.sqrt(1 - forgotten)
    const upperAction = target + 3 * sigma
    const lowerAction = target - 3 * sigma
    return {
      value: average,
      upperAction,
      lowerAction,
      isOutside: average > upperAction || average < lowerAction,
    }
  })
  return gate({
    ...limits(target, settled),
    lambda,
    target,
    valueSigma,
    points,
    n: list.length,
    engineVersion: ENGINE_VERSION,
    method: 'EWMA chart (ISO 7870-6)',
  })
}
