import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor, Trx } from '../../platform/index.js'

export interface SecondFactorRow {
  secret: Buffer
  recoveryCodesLeft: number
}

/** One row a person: the device's secret, and what was used of it. */
@Injectable()
export class SecondFactorsRepository {
  async find(db: Executor, userId: string): Promise<SecondFactorRow | undefined> {
    const { rows } = await sql<SecondFactorRow>`
      select secret, cardinality(recovery_hashes) as recovery_codes_left
      from second_factors where user_id = ${userId}`.execute(db)
    return rows[0]
  }

  /** A set-up that was begun before and never confirmed is replaced. */
  async put(trx: Trx, userId: string, secret: Buffer): Promise<void> {
    await sql`insert into second_factors (user_id, secret) values (${userId}, ${secret})
      on conflict (user_id) do update set secret = excluded.secret, last_step = 0, recovery_hashes = '{}'`.execute(
      trx,
    )
  }

  async putRecoveryHashes(trx: Trx, userId: string, hashes: readonly string[]): Promise<void> {
    await sql`update second_factors set recovery_hashes = ${hashes}::text[] where user_id = ${userId}`.execute(
      trx,
    )
  }

  /** Of two who use a code of one step at once, the second finds it used. */
  async takeStep(trx: Trx, userId: string, step: number): Promise<boolean> {
    const { rows } = await sql`update second_factors set last_step = ${step}
      where user_id = ${userId} and last_step < ${step} returning user_id`.execute(trx)
    return rows.length > 0
  }

  /** @returns how many are left; undefined when it is none of this person's, or was used */
  async takeRecoveryHash(trx: Trx, userId: string, hash: string): Promise<number | undefined> {
    const { rows } = await sql<{ left: number }>`
      update second_factors set recovery_hashes = array_remove(recovery_hashes, ${hash})
      where user_id = ${userId} and ${hash} = any(recovery_hashes)
      returning cardinality(recovery_hashes) as left`.execute(trx)
    return rows[0]?.left
  }

  async delete(trx: Trx, userId: string): Promise<void> {
    await sql`delete from second_factors where user_id = ${userId}`.execute(trx)
  }
}
