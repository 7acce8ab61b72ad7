/* Names alone, without the calculations behind them: contracts and forms list them. */

export const DECISION_RULES = ['simple', 'rounded', 'guarded', 'four-zone'] as const
export type DecisionRule = (typeof DECISION_RULES)[number]

export const NON_DETECT_RULES = [
  'less-than-loq',
  'less-than-mdl',
  'zero',
  'half-loq',
  'half-pql',
  'as-measured',
] as const
export type NonDetectRule = (typeof NON_DETECT_RULES)[number]
