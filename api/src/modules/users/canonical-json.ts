import { createHash } from 'node:crypto'

/**
 * One text for one value, whatever the order its keys were written in (RFC 8785's order of keys and JSON's own
 * numbers): what a signature's hash is made of.
 */
export function canonicalJson(value: unknown): string {
  // through JSON once, so that dates are text and what is undefined is gone, as it will be read back
  return write(JSON.parse(JSON.stringify(value ?? null)))
}

export function sha256Of(value: unknown): string {
  return createHash('sha256').update(canonicalJson(value), 'utf8').digest('hex')
}

function write(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(write).join(',')}]`
  if (typeof value === 'object' && value !== null) {
    const entries = Object.entries(value).sort(([a], [b]) => (a < b ? -1 : 1))
    return `{${entries.map(([key, item]) => `${JSON.stringify(key)}:${write(item)}`).join(',')}}`
  }
  return JSON.stringify(value)
}
