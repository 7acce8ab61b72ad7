import { Injectable } from '@nestjs/common'
import type { PositionLimit, ReportingRules } from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import { notFound, type Executor, type Trx } from '../../platform/index.js'
import type {
  DilutionChangeRow,
  NewReading,
  PositionKind,
  PositionReadingRow,
  PositionRow,
} from './batch-rows.js'

export interface NewPosition {
  position: number
  kind: PositionKind
  determinationId: string | null
  ofPositionId: string | null
  expected: string | null
  added: string | null
  lotId: string | null
  limits: PositionLimit[]
  reporting: ReportingRules
}

@Injectable()
export class PositionsRepository {
  async list(db: Executor, batchId: string): Promise<PositionRow[]> {
    const { rows } = await sql<PositionRow>`
      select p.id, p.position, p.kind, p.determination_id, p.of_position_id, p.expected, p.added, p.lot_id,
        l.number as lot_number, p.dilution, p.note, p.limits, p.reporting, p.version, d.sample_id, s.number as sample_number,
        sp.name as point_name, c.name as client_name, s.collected_at, d.holding_due_at, d.holding_rule,
        (m.definition #>> '{holdTime,rule,soonWithinHours}')::float8 as soon_within_hours, r.id as result_id
      from positions p
        left join material_lots l on l.id = p.lot_id
        left join determinations d on d.id = p.determination_id
        left join methods m on m.id = d.method_id
        left join samples s on s.id = d.sample_id
        left join sampling_points sp on sp.id = s.sampling_point_id
        left join clients c on c.id = s.client_id
        left join results r on r.position_id = p.id
      where p.batch_id = ${batchId} order by p.position`.execute(db)
    return rows
  }

  /** Every reading ever taken, oldest first. */
  async listReadings(db: Executor, batchId: string): Promise<PositionReadingRow[]> {
    const { rows } = await sql<PositionReadingRow>`
      select r.id, r.position_id, r.replicate, r.absorbance_text, r.read_at, r.read_by, u.name as read_by_name, r.source,
        r.supersedes_id, r.reason
      from position_readings r join users u on u.id = r.read_by where r.batch_id = ${batchId} order by r.id`.execute(
      db,
    )
    return rows
  }

  /** From the history: a dilution is corrected in place. */
  async listDilutionChanges(
    db: Executor,
    { positionIds, since }: { positionIds: readonly string[]; since: Date },
  ): Promise<DilutionChangeRow[]> {
    const { rows } = await sql<DilutionChangeRow>`
      select thing_id as position_id, old ->> 'dilution' as "from", new ->> 'dilution' as "to", actor_name as by, at,
        coalesce(reason, '') as reason
      from history where thing = 'positions' and thing_id = any(${positionIds}::bigint[]) and at >= ${since}
        and operation = 'update' and new ->> 'dilution' is not null
      order by at, id`.execute(db)
    return rows
  }

  async insert(
    trx: Trx,
    batchId: string,
    positions: readonly NewPosition[],
  ): Promise<{ id: string; determinationId: string | null }[]> {
    const { rows } = await sql<{ id: string; determinationId: string | null }>`
      insert into positions (batch_id, position, kind, determination_id, of_position_id, expected, added, lot_id, limits, reporting)
      select ${batchId}, n.position, n.kind, n."determinationId", n."ofPositionId", n.expected, n.added, n."lotId",
        n.limits, n.reporting
      from jsonb_to_recordset(${JSON.stringify(positions)}::jsonb) as n(position int, kind text, "determinationId" bigint,
        "ofPositionId" bigint, expected text, added text, "lotId" bigint, limits jsonb, reporting jsonb)
      order by n.position returning id, determination_id`.execute(trx)
    return rows
  }

  async insertReadings(
    trx: Trx,
    readings: readonly NewReading[],
    {
      batchId,
      readBy,
      source,
      uploadId,
    }: { batchId: string; readBy: string; source: 'typed' | 'pasted' | 'file'; uploadId: string | null },
  ): Promise<void> {
    await sql`
      insert into position_readings (batch_id, position_id, replicate, absorbance_text, absorbance, read_by, source,
        upload_id, supersedes_id, reason)
      select ${batchId}, n."positionId", n.replicate, n.absorbance, n.absorbance::numeric, ${readBy}, ${source},
        ${uploadId}, n."supersedesId", n.reason
      from jsonb_to_recordset(${JSON.stringify(readings)}::jsonb) as n("positionId" bigint, replicate int, absorbance text,
        "supersedesId" bigint, reason text)
      order by n."positionId", n.replicate`.execute(trx)
  }

  async findBatchId(db: Executor, positionId: string): Promise<string> {
    const { rows } = await sql<{
      batchId: string
    }>`select batch_id from positions where id = ${positionId}`.execute(db)
    const [row] = rows
    if (!row) throw notFound('position')
    return row.batchId
  }

  async change(
    trx: Trx,
    { id, dilution, note }: { id: string; dilution: string; note: string },
  ): Promise<void> {
    await sql`update positions set dilution = ${dilution}, note = ${note}, version = version + 1 where id = ${id}`.execute(
      trx,
    )
  }
}
