import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor } from './executor.js'

@Injectable()
export class RoleRepository {
  async describe(db: Executor): Promise<{ role: string; canChangeHistory: boolean }> {
    const { rows } = await sql<{ role: string; canChangeHistory: boolean }>`
      select current_user as role,
        has_table_privilege('history', 'insert, update, delete, truncate')
        or pg_has_role((select relowner from pg_class where oid = 'history'::regclass), 'member')
        as can_change_history`.execute(db)
    return rows[0] ?? { role: 'unknown', canChangeHistory: true }
  }
}
