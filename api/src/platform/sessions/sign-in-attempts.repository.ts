import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor, Trx } from '../database/executor.js'

export interface Counts {
  /** wrong tries in the window, at this account from this address, since the last right one */
  pair: number
  account: number
  address: number
  /** this account signed in from this address within the last month */
  isKnownAddress: boolean
  /** until the oldest counted try leaves the window */
  secondsLeft: number
}

const KNOWN = sql`interval '30 days'`

@Injectable()
export class SignInAttemptsRepository {
  async lockAccount(trx: Trx, accountHash: string): Promise<void> {
    await sql`select pg_advisory_xact_lock(hashtextextended('weirlight.sign-in.' || ${accountHash}, 0))`.execute(
      trx,
    )
  }

  async count(
    db: Executor,
    { accountHash, address, minutes }: { accountHash: string; address: string; minutes: number },
  ): Promise<Counts> {
    const { rows } = await sql<Counts>`
      with recent as (
        select * from sign_in_attempts
        where at > now() - make_interval(mins => ${minutes})
          and (account_hash = ${accountHash} or address = ${address})
      ), good as (
        select max(at) as at from sign_in_attempts
        where succeeded and account_hash = ${accountHash} and address = ${address} and at > now() - ${KNOWN}
      )
      select
        count(*) filter (where account_hash = ${accountHash} and address = ${address}
          and at > coalesce((select at from good), '-infinity'))::int as pair,
        count(*) filter (where account_hash = ${accountHash})::int as account,
        count(*) filter (where address = ${address})::int as address,
        (select at is not null from good) as is_known_address,
        coalesce(extract(epoch from min(at) + make_interval(mins => ${minutes}) - now()), 0)::float8 as seconds_left
      from recent where not succeeded`.execute(db)
    return rows[0] ?? { pair: 0, account: 0, address: 0, isKnownAddress: false, secondsLeft: 0 }
  }

  async insert(trx: Trx, row: { accountHash: string; address: string; succeeded: boolean }): Promise<string> {
    const { id } = await trx
      .insertInto('signInAttempts')
      .values(row)
      .returning('id')
      .executeTakeFirstOrThrow()
    return id
  }

  async delete(trx: Trx, id: string): Promise<void> {
    await trx.deleteFrom('signInAttempts').where('id', '=', id).execute()
  }

  async deleteOlderThan(trx: Trx, days: number): Promise<void> {
    await trx
      .deleteFrom('signInAttempts')
      .where('at', '<', sql<Date>`now() - make_interval(days => ${days})`)
      .execute()
  }
}
