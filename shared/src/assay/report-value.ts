import {
  finiteResult,
  requireFinite,
  requireNotNegative,
  requireObject,
  requireOneOf,
  requirePositive,
} from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { Decimal } from './decimal.js'
import { decimalsKept, requireRounding, roundDecimal, roundReported, type Rounding } from './rounding.js'
import { NON_DETECT_RULES, type NonDetectRule } from './rule-names.js'

export type ReportFlag =
  'not-detected' | 'estimated' | 'above-range' | 'below-range' | 'quantification-above-limit'

export interface ReportValueInput {
  /** in the sample, unrounded, after dilution; may be negative */
  concentration: number
  /** coverage factor 2, same unit; left out where the laboratory has none */
  expandedUncertainty?: number | undefined
  /** same unit; practicalQuantification (PQL) is the quantification limit when left out */
  limits: { detection: number; quantification: number; practicalQuantification?: number | undefined }
  nonDetect: NonDetectRule
  rounding: Rounding
  /** printed after the number; 'ug/L' and 'umol/L' are printed with the micro sign */
  unit: string
  /** as predictConcentration says it */
  outsideRange?: 'below' | 'above' | null | undefined
  /** the lowest limit it will be compared with: says when the quantification limit lies above it */
  complianceLimit?: number | undefined
}

interface Settled {
  valueText: string
  numericForCompliance: number
  flags: ReportFlag[]
  isNumber: boolean
}

/**
 * A limit behind a "<": as the rounding rule writes it where that leaves its value alone (0.01 to two digits is
 * 0.010), else as it stands up to three significant digits, else two, rounded up so that "<" stays true.
 */
function limitText(limit: number, rounding: Rounding): string {
  // three times 0.1 comes in as 0.30000000000000004: twelve digits are the limit, the rest is dust
  const exact = new Decimal(limit).toSignificantDigits(12)
  if (roundDecimal(exact, rounding).eq(exact)) return roundReported(exact.toNumber(), rounding)
  if (exact.sd() <= 3) return exact.toFixed()
  return exact.toSignificantDigits(2, Decimal.ROUND_UP).toFixed()
}

function printedUnit(unit: unknown): string {
  if (typeof unit !== 'string' || unit.trim() === '' || unit.length > 20) {
    throw new AssayError('invalid-argument', 'Give the unit that is printed after the number.')
  }
  return unit.trim().replace(/^u(?=g|mol)/, 'µ')
}

function settle(input: ReportValueInput, rounding: Rounding): Settled {
  const x = input.concentration
  const { detection, quantification } = input.limits
  const pql = input.limits.practicalQuantification ?? quantification
  const isDetected = x >= detection
  const upper = input.nonDetect === 'half-pql' ? pql : quantification
  if (isDetected && x >= upper) {
    return { valueText: roundReported(x, rounding), numericForCompliance: x, flags: [], isNumber: true }
  }
  const flags: ReportFlag[] = [isDetected ? 'estimated' : 'not-detected']
  const measured = { valueText: roundReported(x, rounding), numericForCompliance: x, flags, isNumber: true }
  const below = (limit: number, numericForCompliance: number) => ({
    valueText: `<${limitText(limit, rounding)}`,
    numericForCompliance,
    flags,
    isNumber: false,
  })
  switch (input.nonDetect) {
    case 'as-measured':
      return measured
    case 'less-than-loq':
      return below(quantification, quantification)
    case 'half-loq':
      return below(quantification, quantification / 2)
    case 'less-than-mdl':
      return isDetected ? measured : below(detection, detection)
    case 'zero':
      return isDetected ? measured : below(detection, 0)
    case 'half-pql':
      return isDetected ? below(pql, pql / 2) : below(detection, 0)
  }
}

/** U to the decimals of the value (JCGM 100:2008, 7.2.6), or to one significant digit where that would print zero. */
function uncertaintyText(expanded: number, value: number, rounding: Rounding): string {
  const kept = Math.max(0, decimalsKept(roundDecimal(new Decimal(value), rounding), rounding))
  const text = roundReported(expanded, { to: 'decimals', digits: Math.min(15, kept), ties: 'half-up' })
  return Number(text) > 0 ? text : roundReported(expanded, { to: 'significant', digits: 1, ties: 'half-up' })
}

/**
 * A concentration as the certificate prints it and the number that averages and comparisons use.
 *
 * The field disagrees about values below the limits; the rule is an argument (`nonDetect`):
 *
 * | rule | below detection | detection to quantification | source |
 * |---|---|---|---|
 * | less-than-loq | `<LOQ`, counts as LOQ | the same | usual certificate practice (from memory) |
 * | half-loq | `<LOQ`, counts as LOQ/2 | the same | Directive 2009/90/EC, Article 5(1) |
 * | less-than-mdl | `<MDL`, counts as MDL | as measured | usual US practice (from memory) |
 * | zero | `<MDL`, counts as 0 | as measured | 40 CFR 141.23(i)(1) chromium, 141.89(a)(3) copper |
 * | half-pql | `<MDL`, counts as 0 | `<PQL`, counts as PQL/2 | 40 CFR 141.89(a)(4): 0.025 mg/L for copper |
 * | as-measured | as measured, also when negative | as measured | operational use |
 *
 * A text never prints zero for a value below a limit. The numeric value is never rounded here: averages are
 * taken over unrounded values and rounded once, at the end. Flags: `not-detected` below detection, `estimated`
 * between the limits, `above-range`/`below-range` outside the calibrated range, `quantification-above-limit`
 * where the method cannot see the limit it is compared with.
 *
 * @returns text ('0.53 ± 0.04 mg/L', '<0.03 mg/L'), numericForCompliance, flags; also valueText and
 *          uncertaintyText (null behind a "<"), the unit as printed and the rule used
 * @throws AssayError non-finite; invalid-argument: limits not above zero or in the wrong order, unknown rule,
 *         negative uncertainty, empty unit
 */
export function reportValue(input: ReportValueInput) {
  requireObject(input, 'result to report')
  requireObject(input.limits, 'detection and quantification limits')
  requireFinite(input.concentration, 'concentration')
  requireOneOf(input.nonDetect, NON_DETECT_RULES, 'rule for values below the limits')
  const rounding = requireRounding(input.rounding)
  const detection = requirePositive(input.limits.detection, 'detection limit')
  const quantification = requirePositive(input.limits.quantification, 'quantification limit')
  const pql = requirePositive(
    input.limits.practicalQuantification ?? quantification,
    'practical quantification limit',
  )
  if (detection > quantification || detection > pql) {
    throw new AssayError('invalid-argument', 'The detection limit cannot lie above the quantification limit.')
  }
  const unit = printedUnit(input.unit)
  const expanded =
    input.expandedUncertainty === undefined
      ? 0
      : requireNotNegative(input.expandedUncertainty, 'expanded uncertainty')

  const settled = settle(input, rounding)
  const flags = [...settled.flags]
  if (input.outsideRange === 'above') flags.push('above-range')
  if (input.outsideRange === 'below') flags.push('below-range')
  if (input.complianceLimit !== undefined) {
    const limit = requireFinite(input.complianceLimit, 'limit')
    if (quantification > limit) flags.push('quantification-above-limit')
  }
  const uncertainty =
    settled.isNumber && expanded > 0 ? uncertaintyText(expanded, input.concentration, rounding) : null
  return {
    text: `${settled.valueText}${uncertainty === null ? '' : ` ± ${uncertainty}`} ${unit}`,
    numericForCompliance: finiteResult(settled.numericForCompliance, 'number for compliance'),
    flags,
    valueText: settled.valueText,
    uncertaintyText: uncertainty,
    unit,
    nonDetect: input.nonDetect,
    method: `values below the limits by the rule ${input.nonDetect}; rounded to ${rounding.digits} ${
      rounding.to === 'significant' ? 'significant digits' : 'decimals'
    }, ties ${rounding.ties}`,
  }
}
