import { durationWords } from '../../../lib/clock-words'

export interface LineClock {
  at: string | null
  sense: 'due' | 'since' | 'none'
  prefix: string
}

/** What is said of a clock that has run out, where “late by” would not. */
const PAST: Record<string, string> = { ends: 'ended', expires: 'expired' }

/** What is over and done: it was so long ago, not for so long. */
const DONE = ['answered', 'begun', 'invited', 'issued']

/** `review due in 2 h 10 min`, `review late by 3 h`, `holding time: 9 h 20 min left`, `unanswered for 3 h`, `begun 30 h ago`. */
export function lineClockWords(clock: LineClock, now: number): string {
  const { at, sense, prefix } = clock
  if (at === null || sense === 'none') return prefix
  const left = Date.parse(at) - now
  // a duration is not broken across lines
  const words = durationWords(left).replaceAll(' ', '\u00a0')
  if (sense === 'since') {
    return DONE.includes(prefix) ? `${prefix} ${words} ago` : `${prefix} for ${words}`.trim()
  }
  const past = PAST[prefix]
  const isDue = prefix.endsWith(' due')
  if (left >= 0) return past || isDue ? `${prefix} in ${words}` : `${prefix}: ${words} left`
  if (past) return `${past} ${words} ago`
  return isDue ? `${prefix.slice(0, -' due'.length)} late by ${words}` : `${prefix}: late by ${words}`
}
