import type { Limit } from './api/programme-queries'

export const TIES_WORDS = {
  'half-up': 'a 5 goes up',
  'half-even': 'a 5 goes to the even digit',
} as const

export const NON_DETECT_WORDS: Record<string, string> = {
  'less-than-loq': 'reported as below the quantification limit',
  'less-than-mdl': 'reported as below the detection limit',
  zero: 'counts as zero',
  'half-loq': 'counts as half the quantification limit',
  'half-pql': 'counts as half the practical quantitation level',
  'as-measured': 'reported as measured',
}

export const KIND_WORDS: Record<string, string> = {
  mcl: 'enforceable limit',
  'action-level': 'action level',
  secondary: 'aesthetic, not a health limit',
  'parametric-value': 'parametric value',
  indicator: 'indicator parameter',
  guideline: 'guideline',
  aesthetic: 'aesthetic objective',
  'health-advisory': 'health advisory',
}

const digitsWords = (digits: number) => `${digits} significant ${digits === 1 ? 'digit' : 'digits'}`

export const RULE_WORDS: Record<Limit['decisionRule'], (digits: number) => string> = {
  simple: () => 'as measured, the uncertainty is stated and not subtracted',
  rounded: (digits) => `rounded to ${digitsWords(digits)} first`,
  guarded: () => 'with a guard band of the uncertainty',
  'four-zone': () => 'in four zones, by the uncertainty',
}

const STANDINGS = {
  now: { word: 'in force', shape: 'disc', tone: 'meets' },
  past: { word: 'ended', shape: 'diamond', tone: 'quiet' },
  ahead: { word: 'begins later', shape: 'ring', tone: 'quiet' },
} as const

/** Whether a limit counts on a day; limits are dated and never overwritten. */
export function standingMark(limit: Pick<Limit, 'validFrom' | 'validUntil'>, day: string) {
  if (limit.validFrom > day) return STANDINGS.ahead
  return limit.validUntil !== null && limit.validUntil <= day ? STANDINGS.past : STANDINGS.now
}
