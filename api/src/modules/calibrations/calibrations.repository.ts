import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor, Trx } from '../../platform/index.js'
import type {
  CalibrationListRow,
  CalibrationUse,
  CalibrationWholeRow,
  LockedCalibration,
} from './calibration-rows.js'

const ROW = sql`k.id, k.number, k.method_id, m.title as method_title, m.analyte, m.form, k.instrument_id,
  i.name as instrument_name, k.cell_path_cm, k.state, k.prepared_by, u.name as prepared_by_name, k.submitted_at, k.valid_until,
  (k.stored ->> 'slope')::float8 as slope, (k.stored ->> 'correlation')::float8 as correlation,
  (select count(*)::int from jsonb_array_elements(k.criteria) as one where one ->> 'outcome' = 'fail') as criteria_failed,
  k.version`
const FROM = sql`from calibrations k join methods m on m.id = k.method_id join instruments i on i.id = k.instrument_id
  join users u on u.id = k.prepared_by`

export interface Draft {
  instrumentId: string
  cellPathCm: string
  model: string
  weighting: string
  stockLotId: string | null
  colourStartedAt: string | null
  temperatureC: string
  note: string
}

@Injectable()
export class CalibrationsRepository {
  async list(
    db: Executor,
    filter: {
      before: string | undefined
      state?: string | undefined
      methodId?: string | undefined
      limit: number
    },
  ): Promise<CalibrationListRow[]> {
    const { rows } = await sql<CalibrationListRow>`
      select ${ROW} ${FROM} where true
        ${filter.before === undefined ? sql`` : sql`and k.id < ${filter.before}`}
        ${filter.state === undefined ? sql`` : sql`and k.state = ${filter.state}`}
        ${filter.methodId === undefined ? sql`` : sql`and k.method_id = ${filter.methodId}`}
      order by k.id desc limit ${filter.limit + 1}`.execute(db)
    return rows
  }

  async find(db: Executor, id: string): Promise<CalibrationWholeRow | undefined> {
    const { rows } = await sql<CalibrationWholeRow>`
      select ${ROW}, k.draft_id, k.model, k.weighting, k.stock_lot_id, l.number as stock_lot_number, k.colour_started_at,
        k.temperature_c, k.note, k.created_at, k.stored, k.criteria, k.returned_reason, k.justification, k.ended_reason,
        k.signed_at, k.ended_at, k.replaced_by as replaced_by_id, r.number as replaced_by_number,
        m.code as method_code, m.edition as method_edition,
        jsonb_build_object('wavelengthNm', m.definition -> 'wavelengthNm', 'molarMass', m.definition -> 'molarMass',
          'acceptance', m.definition -> 'acceptance', 'absorbanceLimits', m.definition -> 'absorbanceLimits',
          'slopeTolerancePercent', m.definition -> 'slopeTolerancePercent', 'reportingLimit', m.definition -> 'reportingLimit',
          'molarAbsorptivity', m.definition -> 'molarAbsorptivity',
          'calibrationMaxAgeDays', m.definition -> 'calibrationMaxAgeDays') as definition,
        coalesce((select jsonb_agg(jsonb_build_object('id', ml.id::text, 'number', ml.number, 'name', ml.name) order by ml.id)
          from calibration_lots cl join material_lots ml on ml.id = cl.lot_id where cl.calibration_id = k.id), '[]') as reagent_lots,
        coalesce((select jsonb_agg(jsonb_build_object('id', b.id::text, 'number', b.number) order by b.id)
          from batches b where b.calibration_id = k.id), '[]') as batches
      ${FROM} left join material_lots l on l.id = k.stock_lot_id left join calibrations r on r.id = k.replaced_by
      where k.id = ${id}`.execute(db)
    return rows[0]
  }

  /** Whether results may be read off it, in one short look. */
  async findUse(db: Executor, id: string): Promise<CalibrationUse | undefined> {
    const { rows } = await sql<CalibrationUse>`
      select number, state, valid_until, weirlight_now() as now from calibrations where id = ${id}`.execute(
      db,
    )
    return rows[0]
  }

  async findByDraft(db: Executor, draftId: string): Promise<string | undefined> {
    const { rows } = await sql<{
      id: string
    }>`select id from calibrations where draft_id = ${draftId}`.execute(db)
    return rows[0]?.id
  }

  async lock(trx: Trx, id: string): Promise<LockedCalibration | undefined> {
    const { rows } = await sql<LockedCalibration>`
      select k.id, k.number, k.state, k.method_id, k.instrument_id, k.cell_path_cm, k.prepared_by,
        u.name as prepared_by_name, k.valid_until, k.version
      from calibrations k join users u on u.id = k.prepared_by where k.id = ${id} for update of k`.execute(
      trx,
    )
    return rows[0]
  }

  /** @returns undefined when the form was sent before */
  async insert(
    trx: Trx,
    draft: Draft & { draftId: string; methodId: string; preparedBy: string; copiedFrom: string | null },
  ): Promise<string | undefined> {
    const { rows } = await sql<{ id: string }>`
      insert into calibrations (number, draft_id, method_id, instrument_id, cell_path_cm, model, weighting, stock_lot_id,
        colour_started_at, temperature_c, note, prepared_by, copied_from)
      values (next_number('K', 'calibration_numbers', 4), ${draft.draftId}, ${draft.methodId}, ${draft.instrumentId},
        ${draft.cellPathCm}, ${draft.model}, ${draft.weighting}, ${draft.stockLotId}, ${draft.colourStartedAt},
        ${draft.temperatureC}, ${draft.note}, ${draft.preparedBy}, ${draft.copiedFrom})
      on conflict (draft_id) do nothing returning id`.execute(trx)
    return rows[0]?.id
  }

  async update(trx: Trx, id: string, draft: Draft): Promise<void> {
    await sql`update calibrations set instrument_id = ${draft.instrumentId}, cell_path_cm = ${draft.cellPathCm},
      model = ${draft.model}, weighting = ${draft.weighting}, stock_lot_id = ${draft.stockLotId},
      colour_started_at = ${draft.colourStartedAt}, temperature_c = ${draft.temperatureC}, note = ${draft.note},
      version = version + 1 where id = ${id}`.execute(trx)
  }

  async setLots(trx: Trx, id: string, lotIds: readonly string[]): Promise<void> {
    await sql`delete from calibration_lots where calibration_id = ${id} and not lot_id = any(${lotIds}::bigint[])`.execute(
      trx,
    )
    await sql`insert into calibration_lots (calibration_id, lot_id)
      select ${id}, lot from unnest(${lotIds}::bigint[]) as lot on conflict do nothing`.execute(trx)
  }

  async submit(
    trx: Trx,
    { id, state, stored, criteria }: { id: string; state: string; stored: unknown; criteria: unknown },
  ): Promise<void> {
    await sql`update calibrations set state = ${state}, submitted_at = weirlight_now(), stored = ${JSON.stringify(stored)}::jsonb,
      criteria = ${JSON.stringify(criteria)}::jsonb, version = version + 1 where id = ${id}`.execute(trx)
  }

  /** Until its method's age or its first lot runs out, a lot counting to the end of its day in the laboratory. */
  async findValidity(
    db: Executor,
    { lotIds, maxAgeDays }: { lotIds: readonly string[]; maxAgeDays: number },
  ): Promise<Date> {
    const { rows } = await sql<{ until: Date }>`
      select least(weirlight_now() + make_interval(hours => (${maxAgeDays} * 24)::int),
        (select ((min(expires_on) + 1)::timestamp at time zone coalesce((select time_zone from laboratory), 'UTC'))
          from material_lots where id = any(${lotIds}::bigint[]))) as until`.execute(db)
    const [row] = rows
    if (!row) throw new Error('The database gave no time.')
    return row.until
  }

  /** One at a time for a method on an instrument and cell: the next sees what the last put in force. */
  async lockPlace(trx: Trx, { methodId, instrumentId, cellPathCm }: LockedCalibration): Promise<void> {
    await sql`select pg_advisory_xact_lock(hashtext(${`calibration ${methodId} ${instrumentId} ${cellPathCm}`}))`.execute(
      trx,
    )
  }

  async lockInForce(trx: Trx, place: LockedCalibration): Promise<{ id: string } | undefined> {
    const { rows } = await sql<{ id: string }>`
      select id from calibrations where method_id = ${place.methodId} and instrument_id = ${place.instrumentId}
        and cell_path_cm = ${place.cellPathCm} and state = 'in-force' for update`.execute(trx)
    return rows[0]
  }

  async replace(trx: Trx, { id, by, state }: { id: string; by: string; state: string }): Promise<void> {
    await sql`update calibrations set state = ${state}, replaced_by = ${by}, ended_at = weirlight_now(),
      version = version + 1 where id = ${id}`.execute(trx)
  }

  async sign(
    trx: Trx,
    {
      id,
      state,
      by,
      validUntil,
      justification,
    }: { id: string; state: string; by: string; validUntil: Date; justification: string },
  ): Promise<void> {
    await sql`update calibrations set state = ${state}, signed_by = ${by}, signed_at = weirlight_now(),
      valid_until = ${validUntil}, justification = ${justification}, version = version + 1 where id = ${id}`.execute(
      trx,
    )
  }

  async sendBack(
    trx: Trx,
    { id, state, by, reason }: { id: string; state: string; by: string; reason: string },
  ): Promise<void> {
    await sql`update calibrations set state = ${state}, returned_by = ${by}, returned_reason = ${reason},
      version = version + 1 where id = ${id}`.execute(trx)
  }

  async end(trx: Trx, { id, state, reason }: { id: string; state: string; reason: string }): Promise<void> {
    await sql`update calibrations set state = ${state}, ended_at = weirlight_now(), ended_reason = ${reason},
      version = version + 1 where id = ${id}`.execute(trx)
  }

  /** Those whose time is over, locked; one that somebody works on just now is left for the next round. */
  async lockOver(trx: Trx): Promise<{ id: string; state: 'in-force' }[]> {
    const { rows } = await sql<{ id: string; state: 'in-force' }>`
      select id, state from calibrations where state = 'in-force' and valid_until <= weirlight_now()
      order by id for update skip locked`.execute(trx)
    return rows
  }
}
