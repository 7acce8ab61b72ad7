import { Injectable } from '@nestjs/common'
import { sql, type Selectable } from 'kysely'
import type { Executor, Trx } from '../database/executor.js'
import type { HistorySeals } from '../database/types.gen.js'

export type SealRow = Selectable<HistorySeals>

/** every writer of history holds it shared until it commits (function write_history) */
const WRITERS = sql.lit(7236004)
const PAGE = 5000

@Injectable()
export class SealsRepository {
  async findLast(db: Executor): Promise<SealRow | undefined> {
    return db.selectFrom('historySeals').selectAll().orderBy('number', 'desc').limit(1).executeTakeFirst()
  }

  /** the newest first */
  async list(
    db: Executor,
    { before, limit }: { before?: string | undefined; limit: number },
  ): Promise<SealRow[]> {
    return db
      .selectFrom('historySeals')
      .selectAll()
      .$if(before !== undefined, (query) => query.where('number', '<', before ?? '0'))
      .orderBy('number', 'desc')
      .limit(limit)
      .execute()
  }

  /** @returns false when somebody is writing at this moment */
  async tryHoldWriters(trx: Trx): Promise<boolean> {
    const { rows } = await sql<{
      held: boolean
    }>`select pg_try_advisory_xact_lock(${WRITERS}) as held`.execute(trx)
    return rows[0]?.held ?? false
  }

  /** Waits for those who are writing; new ones wait meanwhile, so not for long. */
  async holdWriters(trx: Trx): Promise<void> {
    await sql`set local lock_timeout = '2s'`.execute(trx)
    await sql`select pg_advisory_xact_lock(${WRITERS})`.execute(trx)
  }

  /** While the writers are held: everything up to here is either there for good or never will be. */
  async newestEntry(trx: Trx): Promise<string | undefined> {
    const { rows } = await sql<{ id: string | null }>`select max(id) as id from history`.execute(trx)
    return rows[0]?.id ?? undefined
  }

  /** The leaves of the entries after one id up to another, in order, a page at a time. */
  async *leaves(
    db: Executor,
    { after, upTo }: { after: string; upTo: string },
  ): AsyncGenerator<{ id: string; leaf: string }> {
    let from = after
    for (;;) {
      const { rows } = await sql<{ id: string; leaf: string }>`
        select h.id, history_leaf(h) as leaf from history h
        where h.id > ${from} and h.id <= ${upTo} order by h.id limit ${PAGE}`.execute(db)
      yield* rows
      const last = rows.at(-1)
      if (!last || rows.length < PAGE) return
      from = last.id
    }
  }

  /** The id that ends the next seal of at most `limit` entries. */
  async endOfSeal(
    db: Executor,
    { after, upTo, limit }: { after: string; upTo: string; limit: number },
  ): Promise<string | undefined> {
    const { rows } = await sql<{ id: string | null }>`
      select max(id) as id from (
        select id from history where id > ${after} and id <= ${upTo} order by id limit ${limit}) next`.execute(
      db,
    )
    return rows[0]?.id ?? undefined
  }

  /** @returns false when another process sealed the same entries first */
  async insert(trx: Trx, seal: Omit<SealRow, 'sealedAt'>, at: Date): Promise<boolean> {
    const inserted = await trx
      .insertInto('historySeals')
      .values({ ...seal, sealedAt: at })
      .onConflict((conflict) => conflict.column('number').doNothing())
      .returning('number')
      .executeTakeFirst()
    return inserted !== undefined
  }

  async makePartitions(trx: Trx, { monthsAhead }: { monthsAhead: number }): Promise<void> {
    await sql`select history_make_partitions(
      (now() - interval '1 month')::date, (now() + make_interval(months => ${monthsAhead}))::date)`.execute(
      trx,
    )
  }
}
