import { createHash } from 'node:crypto'
import { Injectable } from '@nestjs/common'
import { Database } from '../database/database.js'
import { ProblemError } from '../http/problem.js'
import { SignInAttemptsRepository, type Counts } from './sign-in-attempts.repository.js'

export const WINDOW_MINUTES = 15
/** wrong tries within the window: one account from one address, one account, one address */
export const TRIES = { pair: 5, account: 30, address: 60 }

/** One try at a passphrase, counted as wrong until it is said to be right. */
export interface Try {
  readonly id: string
  readonly accountHash: string
  readonly address: string
}

/**
 * Slows guessing down without locking anybody out: a refused try is not counted, so nobody can keep an
 * account shut for good; and whoever signed in from an address before is held up by their own tries there alone,
 * however many others are made at the account, or from behind the same address at other accounts.
 */
@Injectable()
export class SignInThrottle {
  constructor(
    private readonly db: Database,
    private readonly attempts: SignInAttemptsRepository,
  ) {}

  /**
   * Before the passphrase is looked at. Tries of one account are counted one after another, so that many sent
   * at once are no more than many.
   * @throws throttled
   */
  async begin(account: string, address: string): Promise<Try> {
    const accountHash = hashOf(account)
    return this.db.unwatched(async (trx) => {
      await this.attempts.lockAccount(trx, accountHash)
      const counts = await this.attempts.count(trx, { accountHash, address, minutes: WINDOW_MINUTES })
      if (isOver(counts)) throw refusal(counts)
      const id = await this.attempts.insert(trx, { accountHash, address, succeeded: false })
      return { id, accountHash, address }
    })
  }

  /** The passphrase was right: the try counts no longer, and earlier wrong ones from there neither. */
  async succeed({ id, accountHash, address }: Try): Promise<void> {
    await this.db.unwatched(async (trx) => {
      await this.attempts.delete(trx, id)
      await this.attempts.insert(trx, { accountHash, address, succeeded: true })
    })
  }

  /** Right so far, and more is asked for: neither a wrong try nor a success. */
  async withdraw({ id }: Try): Promise<void> {
    await this.db.unwatched((trx) => this.attempts.delete(trx, id))
  }
}

function isOver(counts: Counts): boolean {
  if (counts.pair >= TRIES.pair) return true
  if (counts.isKnownAddress) return false
  return counts.account >= TRIES.account || counts.address >= TRIES.address
}

function refusal({ secondsLeft }: Counts): ProblemError {
  const minutes = Math.max(1, Math.ceil(secondsLeft / 60))
  return new ProblemError(
    'throttled',
    `Too many tries. Wait ${minutes} ${minutes === 1 ? 'minute' : 'minutes'}, then try again.`,
    { retryAfterSeconds: Math.max(1, Math.ceil(secondsLeft)) },
  )
}

function hashOf(account: string): string {
  return createHash('sha256').update(account.trim().toLowerCase()).digest('hex')
}
