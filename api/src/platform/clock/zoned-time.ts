/** What a clock on the wall shows, without an offset: `2026-12-01 14:05`, seconds and a T allowed. */
const WALL = /^(\d{4})-(\d{2})-(\d{2})[ T](\d{1,2}):(\d{2})(?::(\d{2}))?$/
const WITH_OFFSET = /^(\d{4}-\d{2}-\d{2})[ T](\d{2}:\d{2})(:\d{2}(?:\.\d{1,6})?)?\s*(Z|[+-]\d{2}:\d{2})$/
const DAY = 86_400_000

export type ReadTime = { at: Date } | { problem: 'unreadable' | 'no-such-time' | 'twice' }

/**
 * A time as people write it, in the given zone unless it carries an offset of its own. Where clocks change, one hour
 * of the night does not exist and another comes twice: both are named, never guessed.
 */
export function readTime(text: string, zone: string): ReadTime {
  const trimmed = text.trim()
  const exact = WITH_OFFSET.exec(trimmed)
  if (exact) {
    const at = new Date(`${exact[1]}T${exact[2]}${exact[3] ?? ':00'}${exact[4]}`)
    return Number.isNaN(at.getTime()) ? { problem: 'unreadable' } : { at }
  }
  const wall = WALL.exec(trimmed)
  if (!wall) return { problem: 'unreadable' }
  const [year, month, day, hour, minute, second] = wall.slice(1).map((part) => Number(part ?? 0))
  const asUtc = Date.UTC(year ?? 0, (month ?? 1) - 1, day, hour, minute, second ?? 0)
  if (!isSameWall(new Date(asUtc), wall)) return { problem: 'unreadable' }
  const found = new Set(
    [asUtc - DAY, asUtc + DAY]
      .map((near) => asUtc - offsetAt(near, zone))
      .filter((candidate) => candidate + offsetAt(candidate, zone) === asUtc),
  )
  const [first] = found
  if (first === undefined) return { problem: 'no-such-time' }
  return found.size > 1 ? { problem: 'twice' } : { at: new Date(first) }
}

/** The 31st of February is refused, not moved into March. */
function isSameWall(at: Date, wall: RegExpExecArray): boolean {
  const [, year, month, day, hour, minute] = wall
  const written = `${year}-${month}-${day}T${(hour ?? '').padStart(2, '0')}:${minute}`
  return at.toISOString().startsWith(written)
}

const formats = new Map<string, Intl.DateTimeFormat>()

function formatOf(zone: string): Intl.DateTimeFormat {
  const known = formats.get(zone)
  if (known) return known
  const made = new Intl.DateTimeFormat('en-GB', {
    timeZone: zone,
    calendar: 'iso8601',
    hourCycle: 'h23',
    year: 'numeric',
    month: '2-digit',
    day: '2-digit',
    hour: '2-digit',
    minute: '2-digit',
    second: '2-digit',
  })
  formats.set(zone, made)
  return made
}

function partsAt(at: number, zone: string): Record<string, string> {
  return Object.fromEntries(
    formatOf(zone)
      .formatToParts(at)
      .map(({ type, value }) => [type, value]),
  )
}

function offsetAt(at: number, zone: string): number {
  const p = partsAt(at, zone)
  const shown = Date.UTC(
    Number(p['year']),
    Number(p['month']) - 1,
    Number(p['day']),
    Number(p['hour']),
    Number(p['minute']),
    Number(p['second']),
  )
  return shown - Math.floor(at / 1000) * 1000
}

/** `2026-12-01 14:05` as the laboratory's clock shows it. */
export function showTime(at: Date, zone: string): string {
  const p = partsAt(at.getTime(), zone)
  return `${p['year']}-${p['month']}-${p['day']} ${p['hour']}:${p['minute']}`
}

/** The day it is there: `2026-12-01`. */
export function showDay(at: Date, zone: string): string {
  return showTime(at, zone).slice(0, 10)
}
