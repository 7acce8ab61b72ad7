import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor, Trx } from '../../platform/index.js'

export type AuthorisedActivity = 'read' | 'sign-calibration' | 'review'

export interface AuthorisationRow {
  id: string
  userId: string
  methodId: string
  methodTitle: string
  activity: AuthorisedActivity
  validFrom: string
  validUntil: string
  evidence: string
  inForce: boolean
}

export interface AuthorisedPerson {
  userId: string
  name: string
  methodId: string
  validUntil: string
}

const today = sql`(weirlight_now() at time zone coalesce((select time_zone from laboratory), 'UTC'))::date`

@Injectable()
export class AuthorisationsRepository {
  async list(db: Executor, userId?: string): Promise<AuthorisationRow[]> {
    const { rows } = await sql<AuthorisationRow>`
      select a.id, a.user_id, a.method_id, m.title as method_title, a.activity, a.valid_from, a.valid_until, a.evidence,
        ${today} between a.valid_from and a.valid_until as in_force
      from authorisations a join methods m on m.id = a.method_id
      ${userId === undefined ? sql`` : sql`where a.user_id = ${userId}`}
      order by m.title, a.activity, a.valid_from desc, a.id desc`.execute(db)
    return rows
  }

  /** Active people whose authorisation holds today. */
  async listInForce(db: Executor, activity: AuthorisedActivity): Promise<AuthorisedPerson[]> {
    const { rows } = await sql<AuthorisedPerson>`
      select u.id as user_id, u.name, a.method_id, max(a.valid_until) as valid_until
      from authorisations a join users u on u.id = a.user_id
      where a.activity = ${activity} and u.status = 'active' and ${today} between a.valid_from and a.valid_until
      group by u.id, u.name, a.method_id order by u.name, u.id`.execute(db)
    return rows
  }

  /** The one that reaches furthest, and whether it holds today; undefined when there never was one. */
  async findBest(
    db: Executor,
    { userId, methodId, activity }: { userId: string; methodId: string; activity: AuthorisedActivity },
  ): Promise<{ inForce: boolean; isAhead: boolean; validFrom: string; validUntil: string } | undefined> {
    const { rows } = await sql<{ inForce: boolean; isAhead: boolean; validFrom: string; validUntil: string }>`
      select ${today} between valid_from and valid_until as in_force, ${today} < valid_from as is_ahead,
        valid_from, valid_until
      from authorisations where user_id = ${userId} and method_id = ${methodId} and activity = ${activity}
      order by 1 desc, valid_until desc limit 1`.execute(db)
    return rows[0]
  }

  async findMethodTitle(db: Executor, methodId: string): Promise<string | undefined> {
    const { rows } = await sql<{ title: string }>`select title from methods where id = ${methodId}`.execute(
      db,
    )
    return rows[0]?.title
  }

  async insert(trx: Trx, row: Omit<AuthorisationRow, 'id' | 'methodTitle' | 'inForce'>): Promise<void> {
    await sql`insert into authorisations (user_id, method_id, activity, valid_from, valid_until, evidence)
      values (${row.userId}, ${row.methodId}, ${row.activity}, ${row.validFrom}, ${row.validUntil}, ${row.evidence})`.execute(
      trx,
    )
  }
}
