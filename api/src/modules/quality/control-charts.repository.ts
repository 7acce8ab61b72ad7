import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor } from '../../platform/index.js'

const RUNS_SHOWN = 120

export interface ChartedPosition {
  batchId: string
  batchNumber: string
  positionId: string
  kind: 'blank' | 'verification' | 'method-blank' | 'control' | 'sample' | 'duplicate' | 'spike'
  ofPositionId: string | null
  position: number
  expected: string | null
  dilution: string
  rules: unknown
  reporting: unknown
  readAt: Date
  absorbances: string[]
}

@Injectable()
export class ControlChartsRepository {
  /** Quality-control positions of the latest submitted runs, with the samples their duplicates belong to. */
  async positions(db: Executor, given: { methodId: string; kind: string }): Promise<ChartedPosition[]> {
    const found = await sql<ChartedPosition>`
      with runs as (
        select id, number, rules from batches
        where method_id = ${given.methodId} and state in ('submitted', 'reviewed', 'released')
        order by id desc limit ${RUNS_SHOWN}
      )
      select r.id as batch_id, r.number as batch_number, p.id as position_id, p.kind, p.of_position_id, p.position,
        p.expected, p.dilution, r.rules, p.reporting, max(d.read_at) as read_at,
        array_agg(d.absorbance_text::text order by d.replicate) as absorbances
      from runs r join positions p on p.batch_id = r.id
      join position_readings d on d.batch_id = r.id and d.position_id = p.id
        and not exists (select from position_readings later where later.supersedes_id = d.id)
      where p.kind = ${given.kind} or (${given.kind} = 'duplicate' and p.kind = 'sample')
      group by r.id, r.number, r.rules, p.id
      order by r.id, p.position`.execute(db)
    return found.rows
  }

  async slopes(db: Executor, methodId: string) {
    return db
      .selectFrom('calibrations')
      .innerJoin('instruments', 'instruments.id', 'calibrations.instrumentId')
      .select([
        'calibrations.number',
        'calibrations.signedAt',
        'calibrations.cellPathCm',
        'instruments.name as instrumentName',
        sql<number>`(calibrations.stored ->> 'slope')::float8`.as('slope'),
      ])
      .where('calibrations.methodId', '=', methodId)
      .where('calibrations.signedAt', 'is not', null)
      .orderBy('calibrations.id', 'desc')
      .limit(RUNS_SHOWN)
      .execute()
  }
}
