import { createHash } from 'node:crypto'
import { Injectable } from '@nestjs/common'
import { Database } from '../database/database.js'
import { ProblemError } from '../http/problem.js'
import { SignInAttemptsRepository } from './sign-in-attempts.repository.js'

export const WINDOW_MINUTES = 15
/** wrong tries within the window: one account from one address, one account, one address */
export const TRIES = { pair: 5, account: 30, address: 60 }

/**
 * Slows guessing down without locking anybody out: a refused try is not counted, so nobody can keep an
 * account shut, and an owner at another address is refused only when the whole world guesses at the account.
 */
@Injectable()
export class SignInThrottle {
  constructor(
    private readonly db: Database,
    private readonly attempts: SignInAttemptsRepository,
  ) {}

  /** Before the passphrase is looked at. @throws throttled */
  async check(email: string, address: string): Promise<void> {
    const counts = await this.attempts.count(this.db.fresh, {
      accountHash: hashOf(email),
      address,
      minutes: WINDOW_MINUTES,
    })
    const isOver =
      counts.pair >= TRIES.pair || counts.account >= TRIES.account || counts.address >= TRIES.address
    if (!isOver) return
    const minutes = Math.max(1, Math.ceil(counts.secondsLeft / 60))
    throw new ProblemError(
      'throttled',
      `Too many wrong tries. Wait ${minutes} ${minutes === 1 ? 'minute' : 'minutes'}, or ask for a new passphrase.`,
      { retryAfterSeconds: Math.max(1, Math.ceil(counts.secondsLeft)) },
    )
  }

  async record(email: string, address: string, succeeded: boolean): Promise<void> {
    await this.db.unwatched((trx) =>
      this.attempts.insert(trx, { accountHash: hashOf(email), address, succeeded }),
    )
  }
}

function hashOf(email: string): string {
  return createHash('sha256').update(email.trim().toLowerCase()).digest('hex')
}
