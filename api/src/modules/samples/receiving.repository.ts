import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor } from '../../platform/index.js'
import type { MethodRules } from './method-rules.js'

export interface KnownPoint {
  id: string
  code: string
  name: string
  active: boolean
  clientId: string
  clientCode: string
  clientName: string
  clientActive: boolean
}

export interface KnownMethod extends MethodRules {
  code: string
  edition: string
}

/** What a sample may refer to, in one query each whatever the number of samples. */
@Injectable()
export class ReceivingRepository {
  async listPoints(db: Executor, by: { ids: readonly string[] } | 'all'): Promise<KnownPoint[]> {
    const { rows } = await sql<KnownPoint>`
      select p.id, p.code, p.name, p.active, c.id as client_id, c.code as client_code, c.name as client_name,
        c.active as client_active
      from sampling_points p join clients c on c.id = p.client_id
      ${by === 'all' ? sql`` : sql`where p.id = any(${by.ids}::bigint[])`}`.execute(db)
    return rows
  }

  async listMethods(db: Executor, by: { ids: readonly string[] } | 'all'): Promise<KnownMethod[]> {
    const { rows } = await sql<KnownMethod>`
      select id, code, edition, title, analyte, form, active, definition ->> 'container' as container,
        definition -> 'approvals' as approvals, definition -> 'holdTime' as hold_time
      from methods ${by === 'all' ? sql`` : sql`where id = any(${by.ids}::bigint[])`}`.execute(db)
    return rows
  }

  async listSampleMethods(
    db: Executor,
    sampleId: string,
  ): Promise<(KnownMethod & { determinationId: string })[]> {
    const { rows } = await sql<KnownMethod & { determinationId: string }>`
      select d.id as determination_id, m.id, m.code, m.edition, m.title, d.analyte, d.form, m.active,
        m.definition ->> 'container' as container, m.definition -> 'approvals' as approvals,
        m.definition -> 'holdTime' as hold_time
      from determinations d join methods m on m.id = d.method_id
      where d.sample_id = ${sampleId} and d.state <> 'withdrawn' order by d.id`.execute(db)
    return rows
  }

  async timeZone(db: Executor): Promise<string> {
    const { rows } = await sql<{ timeZone: string }>`select time_zone from laboratory`.execute(db)
    return rows[0]?.timeZone ?? 'UTC'
  }
}
