import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor, Trx } from '../../platform/index.js'
import type {
  Correction,
  DeterminationRow,
  LockedDetermination,
  LockedSample,
  NewSample,
  SampleFilter,
  SampleRow,
  SampleWhole,
  WaitingRow,
} from './sample-rows.js'

const ROW = sql`s.id, s.number, s.client_id, c.name as client_name, s.sampling_point_id as point_id, p.code as point_code,
  p.name as point_name, s.state, s.purpose, s.kind, s.collected_at, s.received_at`

/** one object per determination, as the register shows them */
const SHORT = sql`coalesce((
  select jsonb_agg(jsonb_build_object('analyte', d.analyte, 'form', d.form, 'state', d.state, 'dueAt', d.holding_due_at,
    'rule', d.holding_rule, 'soonWithinHours', m.definition #> '{holdTime,rule,soonWithinHours}') order by d.id)
  from determinations d join methods m on m.id = d.method_id where d.sample_id = s.id), '[]')`

@Injectable()
export class SamplesRepository {
  async list(db: Executor, filter: SampleFilter): Promise<SampleRow[]> {
    const { rows } = await sql<SampleRow>`
      select ${ROW}, ${SHORT} as determinations
      from samples s join clients c on c.id = s.client_id join sampling_points p on p.id = s.sampling_point_id
      where true
        ${filter.before === undefined ? sql`` : sql`and s.id < ${filter.before}`}
        ${filter.state === undefined ? sql`` : sql`and s.state = ${filter.state}`}
        ${filter.clientId === undefined ? sql`` : sql`and s.client_id = ${filter.clientId}`}
        ${filter.pointId === undefined ? sql`` : sql`and s.sampling_point_id = ${filter.pointId}`}
        ${filter.number === undefined ? sql`` : numberLike(filter.number)}
      order by s.id desc limit ${filter.limit + 1}`.execute(db)
    return rows
  }

  async find(db: Executor, id: string): Promise<SampleWhole | undefined> {
    const { rows } = await sql<SampleWhole>`
      select ${ROW}, ${SHORT} as determinations, s.collected_by, s.received_by, u.name as received_by_name,
        s.preservation, s.ph, s.temperature_c, s.container, s.filtered_in_field, s.condition, s.remarks,
        s.acceptance_reason, s.client_consent, s.version, c.active as client_active, p.active as point_active,
        pr.code as programme_code,
        coalesce((select jsonb_agg(jsonb_build_object('id', ce.id::text, 'number', ce.number, 'state', ce.state) order by ce.id)
          from certificates ce where ce.sample_id = s.id), '[]') as certificates
      from samples s
        join clients c on c.id = s.client_id
        join programmes pr on pr.id = c.programme_id
        join sampling_points p on p.id = s.sampling_point_id
        left join users u on u.id = s.received_by
      where s.id = ${id}`.execute(db)
    return rows[0]
  }

  /** With the batch a determination is in or was last in, its latest result, and when it was last read. */
  async listDeterminations(db: Executor, sampleId: string): Promise<DeterminationRow[]> {
    const { rows } = await sql<DeterminationRow>`
      select d.id, d.analyte, d.form, d.method_id, m.title as method_title, d.state, d.holding_due_at, d.holding_rule,
        (m.definition #>> '{holdTime,rule,soonWithinHours}')::float8 as soon_within_hours, d.version,
        b.id as batch_id, b.number as batch_number, b.last_read_at,
        r.id as result_id, r.reported_text, r.unit, r.verdict
      from determinations d
        join methods m on m.id = d.method_id
        left join lateral (
          select ba.id, ba.number, (select max(pr.read_at) from position_readings pr where pr.position_id = po.id) as last_read_at
          from positions po join batches ba on ba.id = po.batch_id
          where po.determination_id = d.id order by po.id desc limit 1) b on d.state not in ('requested', 'withdrawn')
        left join lateral (
          select re.id, re.reported_text, re.unit, re.verdict from results re
          where re.determination_id = d.id and re.state <> 'not-reported' order by re.id desc limit 1) r on true
      where d.sample_id = ${sampleId} order by d.id`.execute(db)
    return rows
  }

  async findByDraft(db: Executor, draftId: string): Promise<string | undefined> {
    const { rows } = await sql<{ id: string }>`select id from samples where draft_id = ${draftId}`.execute(db)
    return rows[0]?.id
  }

  async lock(trx: Trx, id: string): Promise<LockedSample | undefined> {
    const { rows } = await sql<LockedSample>`
      select id, number, client_id, sampling_point_id, purpose, state, collected_at, received_at, preservation, ph,
        temperature_c, version
      from samples where id = ${id} for update`.execute(trx)
    return rows[0]
  }

  /** Its sample first, as everywhere: two people never wait for each other. */
  async lockDetermination(trx: Trx, id: string): Promise<LockedDetermination | undefined> {
    await sql`select id from samples where id = (select sample_id from determinations where id = ${id}) for update`.execute(
      trx,
    )
    const { rows } = await sql<LockedDetermination>`
      select id, sample_id, state, version from determinations where id = ${id} for update`.execute(trx)
    return rows[0]
  }

  /** Numbers are drawn in the order given; a form that was sent before gives nothing back. */
  async insert(
    trx: Trx,
    samples: readonly NewSample[],
  ): Promise<{ id: string; number: string; index: number }[]> {
    const { rows } = await sql<{ id: string; number: string; draftId: string }>`
      insert into samples (number, draft_id, client_id, sampling_point_id, purpose, kind, state, collected_at, collected_by,
        received_at, received_by, preservation, ph, temperature_c, container, filtered_in_field, condition, remarks, upload_id)
      select next_number('S', 'sample_numbers', 5), x.* from (
        select n."draftId", n."clientId", n."pointId", n.purpose, n.kind, n.state, n."collectedAt", n."collectedBy",
          n."receivedAt", n."receivedBy", n.preservation, n.ph, n."temperatureC", n.container, n."filteredInField",
          n.condition, n.remarks, n."uploadId"
        from jsonb_to_recordset(${JSON.stringify(samples.map((sample, index) => ({ ...sample, index })))}::jsonb) as n(
          index int, "draftId" uuid, "clientId" bigint, "pointId" bigint, purpose text, kind text, state text,
          "collectedAt" timestamptz, "collectedBy" text, "receivedAt" timestamptz, "receivedBy" bigint, preservation text,
          ph text, "temperatureC" text, container text, "filteredInField" boolean, condition text, remarks text, "uploadId" bigint)
        order by n.index) x
      on conflict (draft_id) do nothing
      returning id, number, draft_id`.execute(trx)
    return rows.map(({ id, number, draftId }) => ({
      id,
      number,
      index: samples.findIndex((sample) => sample.draftId === draftId),
    }))
  }

  async insertDeterminations(
    trx: Trx,
    determinations: readonly {
      sampleId: string
      clientId: string
      methodId: string
      analyte: string
      form: string
      dueAt: Date
      rule: string
    }[],
  ): Promise<void> {
    await sql`
      insert into determinations (sample_id, client_id, method_id, analyte, form, holding_due_at, holding_rule)
      select n."sampleId", n."clientId", n."methodId", n.analyte, n.form, n."dueAt", n.rule
      from jsonb_to_recordset(${JSON.stringify(determinations)}::jsonb) as n(
        "sampleId" bigint, "clientId" bigint, "methodId" bigint, analyte text, form text, "dueAt" timestamptz, rule text)`.execute(
      trx,
    )
  }

  async decide(
    trx: Trx,
    {
      id,
      state,
      reason,
      consent,
      qualified,
    }: { id: string; state: string; reason: string; consent: string; qualified: boolean },
  ): Promise<void> {
    await sql`update samples set state = ${state}, acceptance_reason = ${reason}, client_consent = ${consent},
      qualified = ${qualified}, version = version + 1 where id = ${id}`.execute(trx)
  }

  async correct(trx: Trx, id: string, change: Correction): Promise<void> {
    await sql`update samples set collected_at = ${change.collectedAt}, collected_by = ${change.collectedBy},
      preservation = ${change.preservation}, ph = ${change.ph}, temperature_c = ${change.temperatureC},
      container = ${change.container}, filtered_in_field = ${change.filteredInField}, condition = ${change.condition},
      remarks = ${change.remarks}, version = version + 1 where id = ${id}`.execute(trx)
  }

  async touch(trx: Trx, id: string): Promise<void> {
    await sql`update samples set version = version + 1 where id = ${id}`.execute(trx)
  }

  async setHolding(trx: Trx, rows: readonly { id: string; dueAt: Date; rule: string }[]): Promise<void> {
    await sql`
      update determinations d set holding_due_at = n."dueAt", holding_rule = n.rule, version = d.version + 1
      from jsonb_to_recordset(${JSON.stringify(rows)}::jsonb) as n(id bigint, "dueAt" timestamptz, rule text)
      where d.id = n.id and (d.holding_due_at <> n."dueAt" or d.holding_rule <> n.rule)`.execute(trx)
  }

  async withdraw(trx: Trx, ids: readonly string[], reason: string): Promise<void> {
    await sql`update determinations set state = 'withdrawn', withdrawn_reason = ${reason}, version = version + 1
      where id = any(${ids}::bigint[])`.execute(trx)
  }

  async listWaiting(db: Executor, methodId: string | undefined): Promise<WaitingRow[]> {
    const { rows } = await sql<WaitingRow>`
      select d.id, s.id as sample_id, s.number as sample_number, c.name as client_name, p.code as point_code,
        p.name as point_name, d.method_id, m.title as method_title, s.collected_at, s.received_at, d.holding_due_at,
        d.holding_rule, (m.definition #>> '{holdTime,rule,soonWithinHours}')::float8 as soon_within_hours,
        s.state as sample_state
      from determinations d
        join samples s on s.id = d.sample_id
        join clients c on c.id = s.client_id
        join sampling_points p on p.id = s.sampling_point_id
        join methods m on m.id = d.method_id
      where d.state = 'requested' and s.state in ('accepted', 'accepted-with-qualification', 'in-analysis', 'reported')
        ${methodId === undefined ? sql`` : sql`and d.method_id = ${methodId}`}
      order by d.holding_due_at, d.id limit 500`.execute(db)
    return rows
  }

  async countWaiting(db: Executor): Promise<{ methodId: string; methodTitle: string; waiting: number }[]> {
    const { rows } = await sql<{ methodId: string; methodTitle: string; waiting: number }>`
      select m.id as method_id, m.title as method_title, count(s.id)::int as waiting
      from methods m
        left join determinations d on d.method_id = m.id and d.state = 'requested'
        left join samples s on s.id = d.sample_id
          and s.state in ('accepted', 'accepted-with-qualification', 'in-analysis', 'reported')
      where m.active or s.id is not null
      group by m.id order by m.title, m.id`.execute(db)
    return rows
  }
}

/** From its first letter on, a number is found by an index; a part of one only by reading every number. */
function numberLike(number: string) {
  return /^s-/i.test(number)
    ? sql`and s.number like ${`${escapeLike(number.toUpperCase())}%`}`
    : sql`and s.number ilike ${`%${escapeLike(number)}%`}`
}

function escapeLike(text: string): string {
  return text.replaceAll(/[\\%_]/g, String.raw`\$&`)
}
