const MINUTE = 60_000
const HOUR = 60 * MINUTE
const DAY = 24 * HOUR

export type ClockTone = 'quiet' | 'caution' | 'above'

/** `4 min`, `9 h 20 min`, `26 h`, `4 days`: whole steps, rounded down, as a person would say it */
export function durationWords(milliseconds: number): string {
  const size = Math.abs(milliseconds)
  if (size < MINUTE) return 'less than a minute'
  if (size < HOUR) return `${Math.floor(size / MINUTE)} min`
  if (size < DAY) {
    const minutes = Math.floor((size % HOUR) / MINUTE)
    const hours = Math.floor(size / HOUR)
    return minutes === 0 ? `${hours} h` : `${hours} h ${minutes} min`
  }
  if (size < 3 * DAY) return `${Math.floor(size / HOUR)} h`
  return `${Math.floor(size / DAY)} days`
}

/** `9 h 20 min left`, `late by 3 h` */
export function dueWords(dueAt: string, now: number): string {
  const left = Date.parse(dueAt) - now
  return left >= 0 ? `${durationWords(left)} left` : `late by ${durationWords(left)}`
}

/** `3 h ago` */
export function agoWords(at: string, now: number): string {
  return `${durationWords(now - Date.parse(at))} ago`
}

/** late is a finding, soon a caution, the rest is quiet */
export function dueTone(dueAt: string, now: number, soonHours = 12): ClockTone {
  const left = Date.parse(dueAt) - now
  if (left < 0) return 'above'
  return left <= soonHours * HOUR ? 'caution' : 'quiet'
}

export interface Window {
  startedAt: string
  fromMinutes: number
  toMinutes: number
}

/** The colour of a tube against its reading window: `opens in 6 min`, `2 min into the reading window`, `closed 3 min ago`. */
export function windowWords(
  window: Window,
  now: number,
): { words: string; tone: ClockTone; isOpen: boolean } {
  const age = now - Date.parse(window.startedAt)
  const opens = window.fromMinutes * MINUTE
  const closes = window.toMinutes * MINUTE
  if (age < opens) return { words: `opens in ${durationWords(opens - age)}`, tone: 'quiet', isOpen: false }
  if (age > closes) {
    return { words: `closed ${durationWords(age - closes)} ago`, tone: 'above', isOpen: false }
  }
  const left = closes - age
  if (left <= 10 * MINUTE) return { words: `closes in ${durationWords(left)}`, tone: 'caution', isOpen: true }
  return { words: `${durationWords(age - opens)} into the reading window`, tone: 'quiet', isOpen: true }
}

/** What runs out first comes first; what has no clock comes last, in the order it had. */
export function byClock<T>(rows: readonly T[], dueAt: (row: T) => string | null): T[] {
  const at = (row: T) => {
    const due = dueAt(row)
    return due === null ? Number.POSITIVE_INFINITY : Date.parse(due)
  }
  return rows.toSorted((a, b) => {
    const [first, second] = [at(a), at(b)]
    return first === second ? 0 : first - second
  })
}
