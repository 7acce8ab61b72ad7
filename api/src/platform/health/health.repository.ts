import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor } from '../database/executor.js'

@Injectable()
export class HealthRepository {
  async answers(db: Executor): Promise<boolean> {
    const { rows } = await sql`select 1`.execute(db)
    return rows.length === 1
  }
}
