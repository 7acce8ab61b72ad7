import { z } from 'zod'
import { invalidInput } from '../http/problem.js'

const keys = z.array(z.string().max(100)).min(1).max(4)

/** What `after` carries: the sort key of the last row shown. Opaque to the client. */
export function toCursor(key: readonly string[]): string {
  return Buffer.from(JSON.stringify(key)).toString('base64url')
}

/** @returns the key's parts, or undefined on the first page */
export function fromCursor(after: string | undefined, parts: number): string[] | undefined {
  if (after === undefined) return undefined
  try {
    const key = keys.length(parts).parse(JSON.parse(Buffer.from(after, 'base64url').toString('utf8')))
    return key
  } catch {
    throw invalidInput([
      { path: 'after', message: 'This page of the list cannot be found; start again at the top.' },
    ])
  }
}

/** For lists in the order of their ids. */
export function idFromCursor(after: string | undefined): string | undefined {
  const [id] = fromCursor(after, 1) ?? []
  if (id === undefined || /^[1-9]\d{0,18}$/.test(id)) return id
  throw invalidInput([
    { path: 'after', message: 'This page of the list cannot be found; start again at the top.' },
  ])
}

/** From `limit + 1` rows: a page and the cursor of the next one. */
export function toPage<R, T>(
  rows: readonly R[],
  { limit, key, item }: { limit: number; key: (row: R) => readonly string[]; item: (row: R) => T },
): { items: T[]; next: string | null } {
  const shown = rows.slice(0, limit)
  const last = shown.at(-1)
  return {
    items: shown.map(item),
    next: rows.length > limit && last !== undefined ? toCursor(key(last)) : null,
  }
}
