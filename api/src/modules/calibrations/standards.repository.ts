import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor, Trx } from '../../platform/index.js'
import type { ReadingRow, StandardRow } from './calibration-rows.js'
import type { StandardsPlan } from './standards-change.js'

@Injectable()
export class StandardsRepository {
  async list(db: Executor, calibrationId: string): Promise<StandardRow[]> {
    const { rows } = await sql<StandardRow>`
      select s.id, s.position, s.role, s.concentration, s.lot_id, l.number as lot_number, s.left_out_reason, s.removed
      from calibration_standards s left join material_lots l on l.id = s.lot_id
      where s.calibration_id = ${calibrationId} order by s.removed, s.position, s.id`.execute(db)
    return rows
  }

  /** Every reading ever taken, oldest first: what counts in a cell is the one nothing supersedes. */
  async listReadings(db: Executor, calibrationId: string): Promise<ReadingRow[]> {
    const { rows } = await sql<ReadingRow>`
      select r.id, r.standard_id, r.replicate, r.absorbance_text, r.read_at, r.read_by, u.name as read_by_name,
        r.supersedes_id, r.reason
      from calibration_readings r join users u on u.id = r.read_by
      where r.calibration_id = ${calibrationId} order by r.id`.execute(db)
    return rows
  }

  async apply(
    trx: Trx,
    plan: StandardsPlan,
    { calibrationId, readBy, reason }: { calibrationId: string; readBy: string; reason: string },
  ): Promise<void> {
    const ids = await this.insertNew(trx, plan, calibrationId)
    const reworded = plan.standards.filter(({ isReworded }) => isReworded)
    if (reworded.length > 0) {
      await sql`update calibration_standards s set position = n.position, role = n.role, concentration = n.concentration,
          lot_id = n."lotId", left_out_reason = n."leftOutReason"
        from jsonb_to_recordset(${JSON.stringify(reworded)}::jsonb)
          as n(id bigint, position int, role text, concentration text, "lotId" bigint, "leftOutReason" text)
        where s.id = n.id`.execute(trx)
    }
    if (plan.removedIds.length > 0) {
      await sql`update calibration_standards set removed = true
        where id = any(${plan.removedIds}::bigint[]) and not removed`.execute(trx)
    }
    const readings = plan.standards.flatMap((standard) => {
      const standardId = standard.id ?? ids.get(standard.position)
      return standard.readings.map((reading) => ({ ...reading, standardId }))
    })
    if (readings.length === 0) return
    await sql`
      insert into calibration_readings (calibration_id, standard_id, replicate, absorbance_text, absorbance, read_by, supersedes_id, reason)
      select ${calibrationId}, n."standardId", n.replicate, n.text, n.text::numeric, ${readBy}, n."supersedesId",
        case when n."supersedesId" is null then '' else ${reason} end
      from jsonb_to_recordset(${JSON.stringify(readings)}::jsonb)
        as n("standardId" bigint, replicate int, text text, "supersedesId" bigint)
      order by n."standardId", n.replicate`.execute(trx)
  }

  /** @returns ids of the new standards by position */
  private async insertNew(
    trx: Trx,
    plan: StandardsPlan,
    calibrationId: string,
  ): Promise<Map<number, string>> {
    const fresh = plan.standards.filter(({ id }) => id === null)
    if (fresh.length === 0) return new Map()
    const { rows } = await sql<{ id: string; position: number }>`
      insert into calibration_standards (calibration_id, position, role, concentration, lot_id, left_out_reason)
      select ${calibrationId}, n.position, n.role, n.concentration, n."lotId", n."leftOutReason"
      from jsonb_to_recordset(${JSON.stringify(fresh)}::jsonb)
        as n(position int, role text, concentration text, "lotId" bigint, "leftOutReason" text)
      order by n.position returning id, position`.execute(trx)
    return new Map(rows.map(({ id, position }) => [position, id]))
  }
}
