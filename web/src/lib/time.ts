import { serverNow } from './server-clock'

interface Parts {
  year: number
  month: number
  day: number
  hour: number
  minute: number
  second: number
}

const formatters = new Map<string, Intl.DateTimeFormat>()

function formatterFor(timeZone: string): Intl.DateTimeFormat {
  const known = formatters.get(timeZone)
  if (known) return known
  const made = new Intl.DateTimeFormat('en-GB', {
    timeZone,
    hourCycle: 'h23',
    year: 'numeric',
    month: '2-digit',
    day: '2-digit',
    hour: '2-digit',
    minute: '2-digit',
    second: '2-digit',
  })
  formatters.set(timeZone, made)
  return made
}

function partsIn(timeZone: string, at: number): Parts {
  const found = new Map(
    formatterFor(timeZone)
      .formatToParts(at)
      .map((part) => [part.type, Number(part.value)]),
  )
  const of = (type: Intl.DateTimeFormatPartTypes) => found.get(type) ?? 0
  return {
    year: of('year'),
    month: of('month'),
    day: of('day'),
    hour: of('hour'),
    minute: of('minute'),
    second: of('second'),
  }
}

const two = (value: number) => String(value).padStart(2, '0')
const dayText = (p: Parts) => `${p.year}-${two(p.month)}-${two(p.day)}`
const timeText = (p: Parts) => `${two(p.hour)}:${two(p.minute)}`

/** minutes east of UTC at that moment in that zone */
export function offsetMinutes(timeZone: string, at: number): number {
  const p = partsIn(timeZone, at)
  const asIfUtc = Date.UTC(p.year, p.month - 1, p.day, p.hour, p.minute, p.second)
  return Math.round((asIfUtc - Math.floor(at / 1000) * 1000) / 60_000)
}

/** `UTC−5`, `UTC+5:30`, with a true minus sign */
export function offsetText(timeZone: string, at: number): string {
  const minutes = offsetMinutes(timeZone, at)
  if (minutes === 0) return 'UTC'
  const sign = minutes < 0 ? '−' : '+'
  const rest = Math.abs(minutes) % 60
  return `UTC${sign}${Math.floor(Math.abs(minutes) / 60)}${rest ? `:${two(rest)}` : ''}`
}

/** `2026-12-01 14:05` in the laboratory's zone */
export function formatInstant(instant: string, timeZone: string): string {
  const p = partsIn(timeZone, Date.parse(instant))
  return `${dayText(p)} ${timeText(p)}`
}

/** `2026-12-01 14:05 (UTC−5)` */
export function formatInstantWithOffset(instant: string, timeZone: string): string {
  return `${formatInstant(instant, timeZone)} (${offsetText(timeZone, Date.parse(instant))})`
}

/** `14:05:31`, for readings */
export function formatTime(instant: string, timeZone: string): string {
  const p = partsIn(timeZone, Date.parse(instant))
  return `${timeText(p)}:${two(p.second)}`
}

/** the day of an instant in the laboratory's zone */
export function dayOf(instant: string | number, timeZone: string): string {
  return dayText(partsIn(timeZone, typeof instant === 'number' ? instant : Date.parse(instant)))
}

export function today(timeZone: string): string {
  return dayOf(serverNow(), timeZone)
}

/** what a person would write for this very minute, for a “now” button */
export function nowText(timeZone: string): string {
  const p = partsIn(timeZone, serverNow())
  return `${dayText(p)} ${timeText(p)}`
}

export function weekday(at: number, timeZone: string): string {
  return new Intl.DateTimeFormat('en-GB', { timeZone, weekday: 'long' }).format(at)
}

export function hourOf(at: number, timeZone: string): number {
  return partsIn(timeZone, at).hour
}

const DAY = /^(\d{4})-(\d{1,2})-(\d{1,2})$/
const MOMENT = /^(\d{4}-\d{1,2}-\d{1,2})[ T](\d{1,2}):(\d{2})$/
export const DAY_SENTENCE = 'Write the date as year-month-day, for example 2026-12-01.'
export const MOMENT_SENTENCE = 'Write date and time as 2026-12-01 14:05.'

/** `2026-12-1` as `2026-12-01`; null when it is no day of the calendar */
export function parseDay(text: string): string | null {
  const match = DAY.exec(text.trim())
  if (!match) return null
  const [year, month, day] = match.slice(1).map(Number)
  if (year === undefined || month === undefined || day === undefined) return null
  const at = new Date(Date.UTC(year, month - 1, day))
  if (at.getUTCMonth() !== month - 1 || at.getUTCDate() !== day) return null
  return `${year}-${two(month)}-${two(day)}`
}

/**
 * What a person writes on the laboratory's wall clock, as an instant with offset (`2026-12-01T14:05:00-05:00`);
 * null when it cannot be read. In the hour that autumn repeats the earlier one is meant.
 */
export function parseMoment(text: string, timeZone: string): string | null {
  const match = MOMENT.exec(text.trim())
  if (!match) return null
  const day = parseDay(match[1] ?? '')
  const hour = Number(match[2])
  const minute = Number(match[3])
  if (!day || hour > 23 || minute > 59) return null
  const wall = Date.parse(`${day}T${two(hour)}:${two(minute)}:00Z`)
  const offsets = [wall - 86_400_000, wall + 86_400_000].map((at) => offsetMinutes(timeZone, at))
  const offset =
    offsets.find((each) => offsetMinutes(timeZone, wall - each * 60_000) === each) ?? offsets[0] ?? 0
  const sign = offset < 0 ? '-' : '+'
  const size = Math.abs(offset)
  return `${day}T${two(hour)}:${two(minute)}:00${sign}${two(Math.floor(size / 60))}:${two(size % 60)}`
}
