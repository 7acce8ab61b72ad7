import { Injectable, type OnApplicationShutdown } from '@nestjs/common'
import { sql, type Kysely } from 'kysely'
import type pg from 'pg'
import { Clock } from '../clock/clock.js'
import { currentRequestId } from '../http/request-context.js'
import type { Acting } from './acting.js'
import { kyselyOn, type DB, type Executor, type Trx } from './executor.js'

export interface DatabaseOptions {
  pool: pg.Pool
  /** a replica for reading; the main pool when absent */
  readPool?: pg.Pool | undefined
  clock: Clock
  /** the loader of the demonstration's past: every connection follows the pinned clock */
  followsPinnedClock?: boolean
}

@Injectable()
export class Database implements OnApplicationShutdown {
  /** for queries that change nothing */
  readonly read: Executor
  /** for the few readings that must not lag behind a replica: the session, the queue */
  readonly fresh: Executor
  readonly pool: pg.Pool
  private readonly clock: Clock
  private readonly write: Kysely<DB>

  constructor(options: DatabaseOptions) {
    this.pool = options.pool
    this.clock = options.clock
    this.write = kyselyOn(options.pool, options.followsPinnedClock ? () => this.clock.pinnedAt : undefined)
    this.fresh = this.write
    this.read = options.readPool ? kyselyOn(options.readPool) : this.write
  }

  /**
   * The one way to change anything. `action` is what history calls it (`result.release`); `reason` is what
   * the person gave, or null where none is asked.
   */
  async transaction<T>(
    actor: Acting,
    action: string,
    reason: string | null,
    fn: (trx: Trx) => Promise<T>,
  ): Promise<T> {
    if (!actor.name.trim()) throw new Error('A transaction needs an actor with a name.')
    if (!/^[a-z][a-z-]*(\.[a-z][a-z-]*)+$/.test(action)) {
      throw new Error(`“${action}” is not the name of an action (thing.verb).`)
    }
    return this.write.transaction().execute(async (trx) => {
      await this.announce(trx, { actor, action, reason })
      return fn(trx)
    })
  }

  /** Work on tables that history does not watch (mail, sessions, sign-in attempts). */
  async unwatched<T>(fn: (trx: Trx) => Promise<T>): Promise<T> {
    return this.write.transaction().execute(fn)
  }

  async onApplicationShutdown(): Promise<void> {
    if (this.read !== this.write) await this.read.destroy()
    await this.write.destroy()
  }

  private async announce(
    trx: Trx,
    { actor, action, reason }: { actor: Acting; action: string; reason: string | null },
  ): Promise<void> {
    await sql`select
      set_config('weirlight.actor_id', ${actor.userId ?? ''}, true),
      set_config('weirlight.actor_name', ${actor.name}, true),
      set_config('weirlight.actor_role', ${actor.role}, true),
      set_config('weirlight.action', ${action}, true),
      set_config('weirlight.reason', ${reason ?? ''}, true),
      set_config('weirlight.request_id', ${currentRequestId() ?? ''}, true),
      set_config('weirlight.now', ${this.clock.pinnedAt?.toISOString() ?? ''}, true)`.execute(trx)
  }
}
