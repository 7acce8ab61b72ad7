import { durationWords } from '../../../lib/clock-words'

export interface LineClock {
  at: string | null
  sense: 'due' | 'since' | 'none'
  prefix: string
}

/** `review due in 2 h 10 min`, `review late by 3 h`, `unanswered for 3 h`, or the prefix alone. */
export function lineClockWords(clock: LineClock, now: number): string {
  const { at, sense, prefix } = clock
  if (at === null || sense === 'none') return prefix
  const left = Date.parse(at) - now
  // a duration is not broken across lines
  const words = durationWords(left).replaceAll(' ', '\u00a0')
  if (sense === 'since') return `${prefix} for ${words}`.trim()
  return (left >= 0 ? `${prefix} in ${words}` : `${prefix} late by ${words}`).trim()
}
