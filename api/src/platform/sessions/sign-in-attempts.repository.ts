import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor, Trx } from '../database/executor.js'

@Injectable()
export class SignInAttemptsRepository {
  /** Wrong tries in the window; those of a pair only since it last succeeded. */
  async count(
    db: Executor,
    { accountHash, address, minutes }: { accountHash: string; address: string; minutes: number },
  ): Promise<{ pair: number; account: number; address: number; secondsLeft: number }> {
    const { rows } = await sql<{ pair: number; account: number; address: number; secondsLeft: number }>`
      with recent as (
        select * from sign_in_attempts
        where at > now() - make_interval(mins => ${minutes})
          and (account_hash = ${accountHash} or address = ${address})
      ), good as (
        select coalesce(max(at), '-infinity') as at from recent
        where succeeded and account_hash = ${accountHash} and address = ${address}
      )
      select
        count(*) filter (where account_hash = ${accountHash} and address = ${address} and at > (select at from good))::int as pair,
        count(*) filter (where account_hash = ${accountHash})::int as account,
        count(*) filter (where address = ${address})::int as address,
        coalesce(extract(epoch from min(at) + make_interval(mins => ${minutes}) - now()), 0)::float8 as seconds_left
      from recent where not succeeded`.execute(db)
    return rows[0] ?? { pair: 0, account: 0, address: 0, secondsLeft: 0 }
  }

  async insert(trx: Trx, row: { accountHash: string; address: string; succeeded: boolean }): Promise<void> {
    await trx.insertInto('signInAttempts').values(row).execute()
  }

  async deleteOlderThan(trx: Trx, days: number): Promise<void> {
    await trx
      .deleteFrom('signInAttempts')
      .where('at', '<', sql<Date>`now() - make_interval(days => ${days})`)
      .execute()
  }
}
