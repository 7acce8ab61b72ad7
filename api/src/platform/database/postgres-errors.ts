import pg from 'pg'
import { ProblemError } from '../http/problem.js'

/** `isUniqueViolation(error, 'users_email_key')`: for a service that has a better sentence for it. */
export function isUniqueViolation(error: unknown, constraint?: string): boolean {
  if (!(error instanceof pg.DatabaseError) || error.code !== '23505') return false
  return constraint === undefined || error.constraint === constraint
}

const AGAIN = 'The database was busy with the same records. Nothing was changed; please try again.'
const AWAY = 'The database does not answer at the moment. Nothing was changed; please try again shortly.'
const NETWORK = new Set(['ECONNREFUSED', 'ECONNRESET', 'ENOTFOUND', 'ETIMEDOUT', 'EPIPE'])

/** The faults of PostgreSQL that a person can do something about. */
export function problemOfPostgres(error: unknown): ProblemError | undefined {
  if (error instanceof pg.DatabaseError) {
    switch (error.code) {
      case '23505':
        return new ProblemError('already-exists', 'The same entry is already there.', { cause: error })
      case '40001':
      case '40P01':
      case '55P03':
        return new ProblemError('unavailable', AGAIN, { cause: error, retryAfterSeconds: 1 })
      case '57P01':
      case '57P02':
      case '57P03':
      case '53300':
        return new ProblemError('unavailable', AWAY, { cause: error, retryAfterSeconds: 5 })
      default:
        return undefined
    }
  }
  if (!(error instanceof Error)) return undefined
  const code = 'code' in error ? error.code : undefined
  const isAway =
    (typeof code === 'string' && NETWORK.has(code)) ||
    /^(Connection terminated|timeout exceeded when trying to connect)/.test(error.message)
  return isAway ? new ProblemError('unavailable', AWAY, { cause: error, retryAfterSeconds: 5 }) : undefined
}
