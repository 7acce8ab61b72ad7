import { Injectable } from '@nestjs/common'
import type {
  BodyOf,
  addInstrument,
  checkKind,
  instrumentRow,
  instrumentView,
} from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import type { z } from 'zod'
import type { Executor, Trx } from '../../platform/index.js'

export type InstrumentRow = z.infer<typeof instrumentRow> & { bandwidthNm: string; hasFailedCheck: boolean }
export type CheckKind = z.infer<typeof checkKind>
export type UsedIn = z.infer<typeof instrumentView>['usedIn']

export interface CheckRow {
  id: string
  kind: CheckKind
  reference: string
  nominal: string
  found: string
  tolerance: string
  unit: string
  passed: boolean
  checkedAt: Date
  checkedById: string
  checkedByName: string
  nextDueOn: string
  note: string
}

const today = sql`(weirlight_now() at time zone coalesce((select time_zone from laboratory), 'UTC'))::date`
/** Of each kind of check the latest counts: whether it passed, and until when it holds. */
const rowsOf = (condition: ReturnType<typeof sql>) => sql<InstrumentRow>`
  select i.id, i.number, i.name, i.kind, i.serial, i.location, i.bandwidth_nm, i.state, i.version,
    checks.next_check_due_on, coalesce(checks.has_failed, false) as has_failed_check,
    i.state = 'in-use' and coalesce(checks.next_check_due_on >= ${today} and not checks.has_failed, false) as usable
  from instruments i left join lateral (
    select min(next_due_on) as next_check_due_on, bool_or(not passed) as has_failed from (
      select distinct on (kind) kind, next_due_on, passed from instrument_checks
      where instrument_id = i.id order by kind, checked_at desc, id desc
    ) latest
  ) checks on true
  ${condition}`

@Injectable()
export class InstrumentsRepository {
  async list(db: Executor): Promise<InstrumentRow[]> {
    const { rows } = await rowsOf(sql`order by i.number, i.id`).execute(db)
    return rows
  }

  async find(db: Executor, id: string): Promise<InstrumentRow | undefined> {
    const { rows } = await rowsOf(sql`where i.id = ${id}`).execute(db)
    return rows[0]
  }

  async lock(trx: Trx, id: string): Promise<InstrumentRow | undefined> {
    await sql`select id from instruments where id = ${id} for no key update`.execute(trx)
    return this.find(trx, id)
  }

  async listChecks(db: Executor, instrumentId: string): Promise<CheckRow[]> {
    const { rows } = await sql<CheckRow>`
      select k.id, k.kind, k.reference, k.nominal, k.found, k.tolerance, k.unit, k.passed, k.checked_at,
        u.id as checked_by_id, u.name as checked_by_name, k.next_due_on, k.note
      from instrument_checks k join users u on u.id = k.checked_by
      where k.instrument_id = ${instrumentId} order by k.checked_at desc, k.id desc limit 200`.execute(db)
    return rows
  }

  async listUses(db: Executor, id: string): Promise<UsedIn> {
    const { rows } = await sql<UsedIn[number]>`
      (select 'calibration' as kind, id, number from calibrations where instrument_id = ${id} order by id desc limit 50)
      union all
      (select 'batch', id, number from batches where instrument_id = ${id} order by id desc limit 50)`.execute(
      db,
    )
    return rows
  }

  /** Exactly, in decimal numbers as they were typed. */
  async isWithin(
    db: Executor,
    { nominal, found, tolerance }: { nominal: string; found: string; tolerance: string },
  ): Promise<boolean> {
    const { rows } = await sql<{ within: boolean }>`
      select abs(${found}::numeric - ${nominal}::numeric) <= ${tolerance}::numeric as within`.execute(db)
    return rows[0]?.within ?? false
  }

  async today(db: Executor): Promise<string> {
    const { rows } = await sql<{ today: string }>`select ${today} as today`.execute(db)
    return rows[0]?.today ?? ''
  }

  /** Whether a check passed since the instrument was last taken out of use, as history tells. */
  async hasPassedSinceTakenOut(db: Executor, id: string): Promise<boolean> {
    const { rows } = await sql`
      select 1 from instrument_checks
      where instrument_id = ${id} and passed and checked_at > coalesce(
        (select at from history where thing = 'instruments' and thing_id = ${id} and new ->> 'state' = 'out-of-use'
          order by at desc, id desc limit 1), '-infinity')
      limit 1`.execute(db)
    return rows.length > 0
  }

  async insert(trx: Trx, row: BodyOf<typeof addInstrument>): Promise<string> {
    const { rows } = await sql<{ id: string }>`
      insert into instruments (number, name, kind, serial, location, bandwidth_nm)
      values (next_number('I', 'instrument_numbers', 2), ${row.name}, ${row.kind}, ${row.serial}, ${row.location},
        ${row.bandwidthNm}) returning id`.execute(trx)
    return rows[0]?.id ?? ''
  }

  async insertCheck(
    trx: Trx,
    row: Omit<CheckRow, 'id' | 'checkedAt' | 'checkedByName'> & { instrumentId: string },
  ): Promise<void> {
    await sql`insert into instrument_checks (instrument_id, kind, reference, nominal, found, tolerance, unit, passed,
        checked_at, checked_by, next_due_on, note)
      values (${row.instrumentId}, ${row.kind}, ${row.reference}, ${row.nominal}, ${row.found}, ${row.tolerance},
        ${row.unit}, ${row.passed}, weirlight_now(), ${row.checkedById}, ${row.nextDueOn}, ${row.note})`.execute(
      trx,
    )
  }

  async updateState(trx: Trx, id: string, state: InstrumentRow['state']): Promise<void> {
    await sql`update instruments set state = ${state}, version = version + 1 where id = ${id}`.execute(trx)
  }
}
