import { requireFinite, requireObject, requireOneOf } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { Decimal, type DecimalValue } from './decimal.js'

export type Ties = 'half-up' | 'half-even'

/** How a reported value is rounded: to so many significant digits or decimals, and where an exact half goes. */
export interface Rounding {
  to: 'significant' | 'decimals'
  /** 1 to 15 significant digits, or 0 to 15 decimals */
  digits: number
  ties: Ties
}

/** Refuses a rounding rule that is not one. */
export function requireRounding(rounding: Rounding): Rounding {
  requireObject(rounding, 'rounding rule')
  const to = requireOneOf(rounding.to, ['significant', 'decimals'], 'kind of rounding')
  const ties = requireOneOf(rounding.ties, ['half-up', 'half-even'], 'rule for ties')
  const digits = requireFinite(rounding.digits, 'number of digits')
  if (!Number.isInteger(digits) || digits > 15 || digits < (to === 'significant' ? 1 : 0)) {
    throw new AssayError(
      'invalid-argument',
      to === 'significant' ? 'Significant digits go from 1 to 15.' : 'Decimals go from 0 to 15.',
    )
  }
  return { to, digits, ties }
}

/** Decimals that a value keeps under the rule; negative when whole tens or hundreds are rounded. */
export function decimalsKept(value: DecimalValue, rounding: Rounding): number {
  if (rounding.to === 'decimals') return rounding.digits
  return value.isZero() ? rounding.digits - 1 : rounding.digits - 1 - value.e
}

/** Rounded as a decimal, for comparisons that must not go through binary again. */
export function roundDecimal(value: DecimalValue, rounding: Rounding): DecimalValue {
  const mode = rounding.ties === 'half-up' ? Decimal.ROUND_HALF_UP : Decimal.ROUND_HALF_EVEN
  if (rounding.to === 'decimals') return value.toDecimalPlaces(rounding.digits, mode)
  return value.isZero() ? value : value.toSignificantDigits(rounding.digits, mode)
}

/**
 * A value as it is reported: rounded once, trailing zeros kept, plain notation.
 *
 * Decimal arithmetic on the shortest decimal form of the double, so that 1.35 and 0.0105 are the ties a
 * person sees. `half-up` sends an exact half away from zero; `half-even` to the even neighbour.
 *
 * The field disagrees about ties (both sides are arguments, never a default of this function):
 * EPA Water Supply Guidance 21 (1981) rounds 5 to 9 up; Standard Methods 1050 B and ASTM E29 round an
 * exact 5 to the even neighbour. 0.01050 mg/L of chromium(VI) is 0.011 by the first and 0.010 by the second.
 *
 * Zero to n significant digits is written with n - 1 decimals; a negative value that rounds to zero loses its sign.
 *
 * @param value in any unit
 * @returns the text, for example '0.010'
 * @throws AssayError non-finite: the value is not a finite number; invalid-argument: not a rounding rule
 */
export function roundReported(value: number, rounding: Rounding): string {
  const rule = requireRounding(rounding)
  const rounded = roundDecimal(new Decimal(requireFinite(value, 'value to round')), rule)
  const text = rounded.toFixed(Math.max(0, decimalsKept(rounded, rule)))
  return rounded.isZero() ? text.replace('-', '') : text
}
