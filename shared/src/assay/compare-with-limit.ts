import {
  finiteResult,
  requireFinite,
  requireNotNegative,
  requireObject,
  requireOneOf,
} from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { Decimal, type DecimalValue } from './decimal.js'
import { normalUpperProbability } from './distributions.js'
import { decimalsKept, requireRounding, roundDecimal, type Rounding } from './rounding.js'
import { DECISION_RULES, type DecisionRule } from './rule-names.js'

export type LimitVerdict = 'below' | 'conditional-below' | 'conditional-above' | 'above'

export interface CompareWithLimitInput {
  /** unrounded; the number for compliance */
  value: number
  /** coverage factor 2, same unit */
  expandedUncertainty?: number | undefined
  /** upper limit, same unit */
  limit: number
  rule: DecisionRule
  /** guard band in multiples of the expanded uncertainty, w = guardFactor * U; 1 when left out */
  guardFactor?: number | undefined
  /** for the rule 'rounded' */
  rounding?: Rounding | undefined
}

/** Probability that the true value lies above the limit: normal, standard uncertainty u; certain when u is 0. */
function probabilityAbove(difference: number, u: number): number {
  if (u === 0) return difference > 0 ? 1 : 0
  const z = difference / u
  if (z > 40) return 1
  if (z < -40) return 0
  return normalUpperProbability(-z)
}

/** Midpoint above the limit at which rounding tips over; the limit itself must survive the rounding. */
function roundingEdge(limit: DecimalValue, rounding: Rounding): DecimalValue {
  if (!roundDecimal(limit, rounding).eq(limit)) {
    throw new AssayError(
      'invalid-argument',
      `The limit ${limit.toFixed()} has more digits than the rounding keeps, so a rounded value cannot be compared with it.`,
    )
  }
  return limit.plus(new Decimal(10).pow(-decimalsKept(limit, rounding)).div(2))
}

interface Zone {
  verdict: LimitVerdict
  acceptance: DecimalValue
  explanation: string
}

function judge(input: CompareWithLimitInput, guardBand: DecimalValue): Zone {
  const value = new Decimal(input.value)
  const limit = new Decimal(input.limit)
  const show = (number: DecimalValue) => number.toSignificantDigits(6).toFixed()
  if (input.rule === 'rounded') {
    if (input.rounding === undefined) {
      throw new AssayError('invalid-argument', 'To compare rounded values, say how they are rounded.')
    }
    const rounding = requireRounding(input.rounding)
    const edge = roundingEdge(limit, rounding)
    const rounded = roundDecimal(value, rounding)
    const isAbove = rounded.gt(limit)
    return {
      verdict: isAbove ? 'above' : 'below',
      acceptance: edge,
      explanation: `Rounded to ${rounded.toFixed(Math.max(0, decimalsKept(rounded, rounding)))}, which is ${
        isAbove ? 'above' : 'not above'
      } the limit ${limit.toFixed()}; values tip over at ${edge.toFixed()}.`,
    }
  }
  const acceptance = limit.minus(guardBand)
  if (input.rule !== 'four-zone') {
    const isAbove = value.gt(acceptance)
    const place = isAbove ? 'above' : 'not above'
    return {
      verdict: isAbove ? 'above' : 'below',
      acceptance,
      explanation:
        input.rule === 'simple'
          ? `The value as measured is ${place} the limit ${limit.toFixed()}.`
          : `The value is ${place} the acceptance limit ${show(acceptance)} (limit ${limit.toFixed()}, guard band ${show(guardBand)}).`,
    }
  }
  const zones = `limit ${limit.toFixed()}, guard band ${show(guardBand)} to either side`
  if (value.lte(acceptance)) {
    return {
      verdict: 'below',
      acceptance,
      explanation: `Below the limit by more than the guard band (${zones}).`,
    }
  }
  if (value.lte(limit)) {
    return {
      verdict: 'conditional-below',
      acceptance,
      explanation: `Below the limit, but by less than the guard band (${zones}).`,
    }
  }
  if (value.lte(limit.plus(guardBand))) {
    return {
      verdict: 'conditional-above',
      acceptance,
      explanation: `Above the limit, but by less than the guard band (${zones}).`,
    }
  }
  return {
    verdict: 'above',
    acceptance,
    explanation: `Above the limit by more than the guard band (${zones}).`,
  }
}

/**
 * A value against an upper limit under a stated decision rule. The verdict is a laboratory finding about one
 * result; whether a law is broken is for the authority to say.
 *
 * Where the field disagrees, the rule is the argument:
 * - `simple`: the value as measured, any excess counts (ASTM E29 absolute method; ILAC-G8:09/2019, 4.2.1).
 * - `rounded`: the value rounded as the limit is written, then compared (EPA Water Supply Guidance 21; ASTM E29
 *   rounding method). US drinking-water law subtracts no uncertainty (from memory).
 * - `guarded`: acceptance limit AL = limit - w, w = guardFactor * U (ILAC-G8:09/2019, 4.2.2; JCGM 106:2012, 8.3.2).
 * - `four-zone`: below, conditional-below, conditional-above, above, split at limit - w, limit, limit + w
 *   (ILAC-G8:09/2019, 4.2.3; the Austrian food code uses the same four with a fixed uncertainty).
 * A value exactly on an edge belongs to the lower zone. Edges are taken in decimal arithmetic.
 *
 * Probabilities are normal with u = U / 2 (JCGM 106:2012, 7.2), null where no uncertainty was given:
 * - probabilityAboveLimit: that the true value behind this result lies above the limit;
 * - probabilityOfFalseAcceptance: the rule's worst case, for a value exactly at the acceptance limit
 *   (0.5 for simple, 0.0228 for a guard band of U);
 * - probabilityOfWrongVerdict: that the true value lies on the other side of the limit from the verdict.
 *
 * @returns verdict, acceptanceLimit (for `rounded` the midpoint where rounding tips over), the probabilities,
 *          guardBand, explanation in one sentence, method
 * @throws AssayError non-finite; invalid-argument: negative limit or uncertainty, no uncertainty for a guard band,
 *         negative guard factor with four zones, no rounding for `rounded`, a limit finer than the rounding
 */
export function compareWithLimit(input: CompareWithLimitInput) {
  requireObject(input, 'comparison')
  const value = requireFinite(input.value, 'value')
  const limit = requireNotNegative(input.limit, 'limit')
  const rule = requireOneOf(input.rule, DECISION_RULES, 'decision rule')
  const expanded =
    input.expandedUncertainty === undefined
      ? null
      : requireNotNegative(input.expandedUncertainty, 'expanded uncertainty')
  const guardFactor = requireFinite(input.guardFactor ?? 1, 'guard factor')
  const usesGuardBand = rule === 'guarded' || rule === 'four-zone'
  if (usesGuardBand && expanded === null) {
    throw new AssayError('invalid-argument', 'A guard band needs the expanded uncertainty of the result.')
  }
  if (rule === 'four-zone' && guardFactor < 0) {
    throw new AssayError('invalid-argument', 'With four zones the guard factor cannot be negative.')
  }
  const guardBand = usesGuardBand ? new Decimal(expanded ?? 0).mul(guardFactor) : new Decimal(0)
  const zone = judge(input, guardBand)
  const acceptanceLimit = finiteResult(zone.acceptance.toNumber(), 'acceptance limit')
  const u = expanded === null ? null : expanded / 2
  const above =
    u === null ? null : probabilityAbove(finiteResult(value - limit, 'difference from the limit'), u)
  const isBelow = zone.verdict === 'below' || zone.verdict === 'conditional-below'
  return {
    verdict: zone.verdict,
    acceptanceLimit,
    probabilityOfFalseAcceptance:
      u === null ? null : u === 0 ? 0 : probabilityAbove(zone.acceptance.minus(limit).toNumber(), u),
    probabilityAboveLimit: above,
    probabilityOfWrongVerdict:
      above === null || u === null ? null : isBelow ? above : probabilityAbove(limit - value, u),
    guardBand: finiteResult(guardBand.toNumber(), 'guard band'),
    explanation: zone.explanation,
    method: usesGuardBand
      ? `${rule}, guard band ${guardFactor} U; ILAC-G8:09/2019, JCGM 106:2012`
      : `${rule}; ILAC-G8:09/2019, ASTM E29`,
  }
}
