import pg from 'pg'

const DATE_OID = 1082

/** A day stays the text it is; `timestamptz` becomes a Date; `bigint` and `numeric` stay exact, as text. */
const types = {
  getTypeParser(oid: number, format?: 'text' | 'binary') {
    if (oid === DATE_OID && format !== 'binary') return (text: string) => text
    return format === 'binary' ? pg.types.getTypeParser(oid, 'binary') : pg.types.getTypeParser(oid, 'text')
  },
}

export interface PoolOptions {
  url: string
  size: number
  name: string
  /** server settings for every session of the pool */
  settings?: Record<string, string>
  onError?: (error: Error) => void
}

export function openPool({ url, size, name, settings = {}, onError }: PoolOptions): pg.Pool {
  const options = Object.entries({ timezone: 'UTC', ...settings })
    .map(([key, value]) => `-c ${key}=${value.replaceAll(/([\\ ])/g, String.raw`\$1`)}`)
    .join(' ')
  const pool = new pg.Pool({
    connectionString: url,
    max: size,
    application_name: name,
    types,
    options,
    connectionTimeoutMillis: 10_000,
    idleTimeoutMillis: 30_000,
  })
  // An idle connection that breaks (the server restarted) is replaced at the next use.
  pool.on('error', (error) => onError?.(error))
  return pool
}
