import { finiteResult, requireFinite, requireObject, requirePositive } from './argument-checks.js'
import { AssayError } from './assay-error.js'

/**
 * Recovery of a known amount in percent: 100 found / expected. Both in the same unit.
 *
 * Source: EURACHEM, The Fitness for Purpose of Analytical Methods (2014), 6.5; Standard Methods 1020 B (control
 * standards, laboratory-fortified blanks).
 * @throws AssayError invalid-argument (expected not above zero), non-finite
 */
export function recoveryPercent(input: { found: number; expected: number }): number {
  requireObject(input, 'recovery')
  const found = requireFinite(input.found, 'concentration found')
  const expected = requirePositive(input.expected, 'expected concentration')
  return finiteResult(100 * (found / expected), 'recovery')
}

/**
 * Recovery of a spike in percent: 100 (spiked - unspiked) / added, concentrations in the same volume and unit.
 *
 * Source: Standard Methods 1020 B.12 (laboratory-fortified matrix); EPA SW-846 Chapter 1.
 * @throws AssayError invalid-argument (nothing added), non-finite
 */
export function spikeRecoveryPercent(input: { spiked: number; unspiked: number; added: number }): number {
  requireObject(input, 'spike recovery')
  const spiked = requireFinite(input.spiked, 'concentration with the spike')
  const unspiked = requireFinite(input.unspiked, 'concentration without the spike')
  const added = requirePositive(input.added, 'concentration added')
  return finiteResult(100 * ((spiked - unspiked) / added), 'spike recovery')
}

/**
 * Relative percent difference of two results: 100 |a - b| / |mean|, never negative.
 *
 * Two zeros differ by 0 %. Results of opposite sign around a mean of zero have no relative difference: refused.
 * Near the detection limit use `absoluteDifference`.
 * Source: Standard Methods 1020 B.12 (duplicates); EPA SW-846 Chapter 1.
 * @throws AssayError no-spread (mean zero), non-finite
 */
export function relativePercentDifference(a: number, b: number): number {
  const first = requireFinite(a, 'first result')
  const second = requireFinite(b, 'second result')
  if (first === second) return 0
  const mean = Math.abs(first / 2 + second / 2)
  if (mean === 0) {
    throw new AssayError(
      'no-spread',
      'The mean of the two results is zero: there is no relative difference. Use the absolute difference.',
    )
  }
  return finiteResult(100 * (Math.abs(first / 2 - second / 2) / mean) * 2, 'relative percent difference')
}

/**
 * Absolute difference of two results, in their unit; for duplicates near the detection limit.
 * Source: EPA Contract Laboratory Program, National Functional Guidelines (duplicates below 5 times the limit).
 * @throws AssayError non-finite, numerical-overflow
 */
export function absoluteDifference(a: number, b: number): number {
  return finiteResult(
    Math.abs(requireFinite(a, 'first result') - requireFinite(b, 'second result')),
    'absolute difference',
  )
}
