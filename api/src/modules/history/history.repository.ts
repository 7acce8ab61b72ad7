import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor } from '../../platform/database/executor.js'

@Injectable()
export class HistoryRepository {
  async findLastChange(
    db: Executor,
    thing: string,
    thingId: string,
  ): Promise<{ changedBy: string; changedAt: Date } | undefined> {
    const { rows } = await sql<{ changedBy: string; changedAt: Date }>`
      select actor_name as changed_by, at as changed_at from history
      where thing = ${thing} and thing_id = ${thingId}
      order by at desc, id desc limit 1`.execute(db)
    return rows[0]
  }
}
