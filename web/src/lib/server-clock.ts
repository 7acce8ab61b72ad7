/*
 * The laboratory's clock is the server's. The page keeps the last time the server stated (its `Date` header) and
 * counts on from it with the monotonic timer, so that a wrong clock on a tablet never shows a wrong clock in words.
 */
let statedAt = performance.timeOrigin
let markedAt = 0
let isStated = false

export function noteServerTime(dateHeader: unknown): void {
  if (typeof dateHeader !== 'string') return
  const stated = Date.parse(dateHeader)
  if (Number.isNaN(stated)) return
  statedAt = stated
  markedAt = performance.now()
  isStated = true
}

/** milliseconds since 1970 by the server's clock, as far as the server has stated it */
export function serverNow(): number {
  return statedAt + performance.now() - markedAt
}

export function hasServerTime(): boolean {
  return isStated
}
