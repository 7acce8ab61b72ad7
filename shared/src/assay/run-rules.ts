import { requireArray, requireFinite, requireObject, requireOneOf } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { requireValues } from './descriptive-statistics.js'
import { gate } from './finite-gate.js'

export const RUN_RULES = [
  '1_3s',
  '1_2s',
  '2_2s',
  'R_4s',
  '4_1s',
  '10_x',
  'WE1',
  'WE2',
  'WE3',
  'WE4',
  'Nelson1',
  'Nelson2',
  'Nelson3',
  'Nelson4',
  'Nelson5',
  'Nelson6',
  'Nelson7',
  'Nelson8',
  'TR569_action',
  'TR569_warning',
  'TR569_trend',
  'TR569_side',
] as const
export type RunRule = (typeof RUN_RULES)[number]

export interface RunRuleViolation {
  /** the point that completes the pattern, from 0 */
  index: number
  rule: RunRule
}

export interface RunRulesInput {
  center: number
  sigma: number
  rules: readonly RunRule[]
  /** run of each value, for R_4s; without it, R_4s looks at neighbouring values */
  runs?: readonly (string | number)[] | undefined
}

// a value that stands on a limit but for the rounding of the division is not beyond it
const HAIR = 1e-9

type Pattern = (z: readonly number[], i: number) => boolean

/** Counts the last `window` points up to i that lie beyond k sigma on the side of point i, which must be one of them. */
function sameSide(k: number, least: number, window: number): Pattern {
  return (z, i) => {
    const side = Math.sign(z[i] ?? 0)
    const isBeyond = (value: number) => side * value > k + HAIR
    if (side === 0 || !isBeyond(z[i] ?? 0)) return false
    return z.slice(Math.max(0, i - window + 1), i + 1).filter(isBeyond).length >= least
  }
}

function lastOf(count: number, test: (values: readonly number[]) => boolean): Pattern {
  return (z, i) => i + 1 >= count && test(z.slice(i + 1 - count, i + 1))
}

function steps(values: readonly number[]): number[] {
  return values.slice(1).map((value, i) => Math.sign(value - (values[i] ?? 0)))
}

function trend(count: number): Pattern {
  return lastOf(count, (values) => {
    const [first, ...others] = steps(values)
    return first !== 0 && others.every((step) => step === first)
  })
}

const beyond = (k: number): Pattern => sameSide(k, 1, 1)
const oneSide = (count: number): Pattern => sameSide(0, count, count)

const PATTERNS: Record<Exclude<RunRule, 'R_4s'>, Pattern> = {
  '1_3s': beyond(3),
  '1_2s': beyond(2),
  '2_2s': sameSide(2, 2, 2),
  '4_1s': sameSide(1, 4, 4),
  '10_x': oneSide(10),
  WE1: beyond(3),
  WE2: sameSide(2, 2, 3),
  WE3: sameSide(1, 4, 5),
  WE4: oneSide(8),
  Nelson1: beyond(3),
  Nelson2: oneSide(9),
  Nelson3: trend(6),
  Nelson4: lastOf(14, (values) =>
    steps(values).every((step, i, all) => step !== 0 && (i === 0 || step === -(all[i - 1] ?? 0))),
  ),
  Nelson5: sameSide(2, 2, 3),
  Nelson6: sameSide(1, 4, 5),
  Nelson7: lastOf(15, (values) => values.every((value) => Math.abs(value) <= 1 + HAIR)),
  Nelson8: lastOf(8, (values) => values.every((value) => Math.abs(value) > 1 + HAIR)),
  TR569_action: beyond(3),
  TR569_warning: sameSide(2, 2, 3),
  TR569_trend: trend(7),
  TR569_side: sameSide(0, 10, 11),
}

function isRangeOver4s(
  z: readonly number[],
  i: number,
  runs: readonly (string | number)[] | undefined,
): boolean {
  const value = z[i] ?? 0
  if (!(Math.abs(value) > 2 + HAIR)) return false
  const isOpposite = (other: number) => Math.sign(other) === -Math.sign(value) && Math.abs(other) > 2 + HAIR
  if (!runs) return i > 0 && isOpposite(z[i - 1] ?? 0)
  return z.some((other, j) => j < i && runs[j] === runs[i] && isOpposite(other))
}

/**
 * Which values of a control chart complete which pattern.
 *
 * Beyond is strictly beyond: a value exactly on 3 sigma is not flagged. Every point that completes a pattern is
 * named, in the order of the values; a point counts only if it takes part in the pattern itself.
 * - Westgard: 1_2s (warning), 1_3s, 2_2s, R_4s (one beyond +2s and one beyond -2s within one run), 4_1s, 10_x.
 * - WE1 to WE4: 1 beyond 3s; 2 of 3 beyond 2s; 4 of 5 beyond 1s; 8 on one side (some print 9; the handbook has 8).
 * - Nelson1 to Nelson8: 1 beyond 3s; 9 on one side; 6 rising or falling; 14 alternating; 2 of 3 beyond 2s; 4 of 5
 *   beyond 1s; 15 within 1s; 8 beyond 1s on either side.
 * - TR569: beyond an action limit; 2 of 3 beyond a warning limit; 7 rising or falling; 10 of 11 on one side.
 *
 * Sources: Westgard et al., Clin. Chem. 27 (1981) 493; Western Electric, Statistical Quality Control Handbook (1956);
 * Nelson, J. Qual. Technol. 16 (1984) 237; Nordtest TR 569; ISO 7870-2:2013.
 *
 * @param values  in the order of time, unit of center and sigma
 * @throws AssayError invalid-argument (unknown rule), no-spread (sigma not above 0), mixed-lengths (runs), non-finite
 */
export function evaluateRunRules(values: readonly number[], input: RunRulesInput): RunRuleViolation[] {
  requireObject(input, 'run rules')
  const center = requireFinite(input.center, 'center')
  const sigma = requireFinite(input.sigma, 'standard deviation')
  if (!(sigma > 0))
    throw new AssayError('no-spread', 'The standard deviation of the chart must be above zero.')
  const rules = Array.from(requireArray(input.rules, 'rules'), (rule) =>
    requireOneOf(rule, RUN_RULES, 'rule'),
  )
  const list = requireValues(values, 0)
  const runs = input.runs === undefined ? undefined : requireArray(input.runs, 'runs')
  if (runs && runs.length !== list.length) {
    throw new AssayError('mixed-lengths', 'Every value needs its run.')
  }
  const z = list.map((value) => (value - center) / sigma)
  const unusable = z.findIndex((value) => !Number.isFinite(value))
  if (unusable >= 0) {
    throw new AssayError(
      'numerical-overflow',
      'A value is too far away to compute with. Check the unit.',
      unusable,
    )
  }
  return gate(
    z.flatMap((_, index) =>
      rules
        .filter((rule) => (rule === 'R_4s' ? isRangeOver4s(z, index, runs) : PATTERNS[rule](z, index)))
        .map((rule) => ({ index, rule })),
    ),
  )
}
