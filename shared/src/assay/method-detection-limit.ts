import { requireArray, requireFinite, requireObject, requireOneOf } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { describeSample, requireValues } from './descriptive-statistics.js'
import { tUpperQuantile } from './distributions.js'
import { gate } from './finite-gate.js'
import { ENGINE_VERSION } from './version.js'

export interface MethodDetectionLimitInput {
  /** results of at least 7 spiked samples */
  spikes: readonly number[]
  /** results of at least 7 method blanks, null where not detected; none at all gives the spike side alone */
  blanks: readonly (number | null)[]
  /** with some blanks not detected and 100 or more of them: the highest (when left out) or the 99th percentile */
  blankRule?: 'highest' | 'percentile-99' | undefined
  /** Student's t exact (when left out) or to the three decimals of the printed table */
  tValue?: 'exact' | 'printed' | undefined
}

export type MdlBlankRule =
  | 'no-blanks'
  | 'all-not-detected'
  | 'some-not-detected-highest'
  | 'some-not-detected-percentile-99'
  | 'all-numeric'

export interface MethodDetectionLimit {
  mdlSpikes: number
  /** null where no blank gives a number */
  mdlBlanks: number | null
  mdl: number
  tSpikes: number
  sdSpikes: number
  meanSpikes: number
  /** null where the rule does not use it */
  meanBlanks: number | null
  sdBlanks: number | null
  tBlanks: number | null
  rule: MdlBlankRule
  /** which side is the limit */
  decidedBy: 'spikes' | 'blanks'
  /** spiked results not above zero: the spike level is then too low */
  spikesNotAboveZero: number
  engineVersion: string
  method: string
}

const LEAST = 7

function tOf(n: number, tValue: 'exact' | 'printed'): number {
  const t = tUpperQuantile(0.01, n - 1)
  return tValue === 'exact' ? t : Math.round(t * 1000) / 1000
}

/**
 * Method detection limit: the greater of that from spiked samples and that from method blanks.
 *
 * MDL_S = t(n-1, 0.99) S of the spiked results. MDL_b: no number among the blanks, none; some, the highest (or, from
 * 100 blanks, the result of rank round(0.99 n)); all, mean + t(n-1, 0.99) S_b, a negative mean counting as 0.
 * Results in one unit. All results count: revision 2 knows no statistical rejection. That the samples cover three
 * batches on three days is for the caller to see to.
 *
 * The field disagrees on t: exact or the printed three decimals; `tValue` says which.
 * Source: 40 CFR Part 136 Appendix B, revision 2 (2017), steps 2 and 4.
 *
 * @throws AssayError too-few-values (fewer than 7 spikes; 1 to 6 blanks), non-finite, invalid-argument
 */
export function methodDetectionLimit(input: MethodDetectionLimitInput): MethodDetectionLimit {
  requireObject(input, 'detection limit study')
  const blankRule = requireOneOf(
    input.blankRule ?? 'highest',
    ['highest', 'percentile-99'],
    'rule for blanks',
  )
  const tValue = requireOneOf(input.tValue ?? 'exact', ['exact', 'printed'], 't value')
  const spikes = requireValues(input.spikes, LEAST, 'spiked results')
  const blanks = Array.from(requireArray(input.blanks, 'blanks'), (value, index) =>
    value === null ? null : requireFinite(value, 'blank', index),
  )
  if (blanks.length > 0 && blanks.length < LEAST) {
    throw new AssayError('too-few-values', `At least ${LEAST} method blanks are needed.`)
  }
  const { mean: meanSpikes, standardDeviation: sdSpikes } = describeSample(spikes)
  const tSpikes = tOf(spikes.length, tValue)
  const mdlSpikes = tSpikes * sdSpikes
  const side = limitFromBlanks({ blanks, blankRule, tValue })
  const isBlanks = side.mdlBlanks !== null && side.mdlBlanks > mdlSpikes
  return gate({
    mdlSpikes,
    mdl: isBlanks ? (side.mdlBlanks ?? mdlSpikes) : mdlSpikes,
    tSpikes,
    sdSpikes,
    meanSpikes,
    ...side,
    decidedBy: isBlanks ? 'blanks' : 'spikes',
    spikesNotAboveZero: spikes.filter((value) => value <= 0).length,
    engineVersion: ENGINE_VERSION,
    method: '40 CFR Part 136 Appendix B, revision 2',
  })
}

function limitFromBlanks(given: {
  blanks: readonly (number | null)[]
  blankRule: 'highest' | 'percentile-99'
  tValue: 'exact' | 'printed'
}): Pick<MethodDetectionLimit, 'mdlBlanks' | 'meanBlanks' | 'sdBlanks' | 'tBlanks' | 'rule'> {
  const { blanks, blankRule, tValue } = given
  const none = { mdlBlanks: null, meanBlanks: null, sdBlanks: null, tBlanks: null }
  const n = blanks.length
  if (n === 0) return { ...none, rule: 'no-blanks' }
  const numbers = blanks.filter((value) => value !== null)
  if (numbers.length === 0) return { ...none, rule: 'all-not-detected' }
  if (numbers.length === n) {
    const { mean, standardDeviation } = describeSample(numbers)
    const tBlanks = tOf(n, tValue)
    return {
      mdlBlanks: Math.max(0, mean) + tBlanks * standardDeviation,
      meanBlanks: mean,
      sdBlanks: standardDeviation,
      tBlanks,
      rule: 'all-numeric',
    }
  }
  if (blankRule === 'highest' || n < 100) {
    return { ...none, mdlBlanks: Math.max(...numbers), rule: 'some-not-detected-highest' }
  }
  // not detected sorts below every number
  const sorted = blanks.toSorted((a, b) => (a ?? -Infinity) - (b ?? -Infinity) || 0)
  const ranked = sorted[Math.round(0.99 * n) - 1] ?? null
  return { ...none, mdlBlanks: ranked, rule: 'some-not-detected-percentile-99' }
}
