import { Injectable } from '@nestjs/common'
import type { Actor, Role } from '@weirlight/shared/permissions'
import { sql } from 'kysely'
import type { Executor, Trx } from '../database/executor.js'

@Injectable()
export class ActorsRepository {
  /** The account as it is now: a disabled one, or one of a changed role, acts as before no longer. */
  async findActive(db: Executor, userId: string): Promise<Actor | undefined> {
    const { rows } = await sql<{ id: string; name: string; role: Role; clientId: string | null }>`
      select id, name, role, client_id from users where id = ${userId} and status = 'active'`.execute(db)
    const row = rows[0]
    return row && { userId: row.id, name: row.name, role: row.role, clientId: row.clientId }
  }

  async endSessions(db: Executor | Trx, userId: string): Promise<void> {
    await sql`delete from sessions where sess ->> 'userId' = ${userId}`.execute(db)
  }
}
