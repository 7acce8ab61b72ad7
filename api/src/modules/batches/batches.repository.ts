import { Injectable } from '@nestjs/common'
import type { AssessmentRules } from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import { notFound, type Executor, type Trx } from '../../platform/index.js'
import type { BatchListRow, BatchStateName, BatchWholeRow, LockedBatch } from './batch-rows.js'

const ROW = sql`b.id, b.number, b.method_id, m.title as method_title, m.analyte, m.form, b.calibration_id,
  k.number as calibration_number, b.state, b.opened_by, u.name as opened_by_name, b.opened_at, b.submitted_at, b.released_at,
  (select count(*)::int from positions p where p.batch_id = b.id) as positions, b.positions_read,
  (select count(*)::int from positions p where p.batch_id = b.id and p.kind = 'sample') as samples,
  b.above_limit, b.open_findings, b.version,
  case when b.state = 'submitted' then b.submitted_at + make_interval(secs => (select hours::float8 * 3600 from clocks
    where code = 'house-review')) end as review_due_at`
const FROM = sql`from batches b join methods m on m.id = b.method_id join calibrations k on k.id = b.calibration_id
  join users u on u.id = b.opened_by`

@Injectable()
export class BatchesRepository {
  async list(
    db: Executor,
    filter: {
      before: string | undefined
      state?: string | undefined
      methodId?: string | undefined
      limit: number
    },
  ): Promise<BatchListRow[]> {
    const { rows } = await sql<BatchListRow>`
      select ${ROW} ${FROM} where true
        ${filter.before === undefined ? sql`` : sql`and b.id < ${filter.before}`}
        ${filter.state === undefined ? sql`` : sql`and b.state = ${filter.state}`}
        ${filter.methodId === undefined ? sql`` : sql`and b.method_id = ${filter.methodId}`}
      order by b.id desc limit ${filter.limit + 1}`.execute(db)
    return rows
  }

  async find(db: Executor, id: string): Promise<BatchWholeRow | undefined> {
    const { rows } = await sql<BatchWholeRow>`
      select ${ROW}, b.instrument_id, i.name as instrument_name, b.replicates, k.valid_until as calibration_valid_until,
        k.cell_path_cm, b.rules, b.returned_reason, b.note, b.colour_started_at,
        jsonb_build_object('wavelengthNm', m.definition -> 'wavelengthNm', 'development', m.definition -> 'development',
          'band', m.definition -> 'band', 'cautions', m.definition -> 'cautions') as definition,
        coalesce((select jsonb_agg(jsonb_build_object('id', l.id::text, 'number', l.number, 'name', l.name) order by l.id)
          from batch_lots bl join material_lots l on l.id = bl.lot_id where bl.batch_id = b.id), '[]') as reagent_lots,
        coalesce((select jsonb_agg(jsonb_build_object('findingId', fa.finding_id, 'kind', fa.kind, 'text', fa.text,
            'by', fu.name, 'at', fa.at) order by fa.id)
          from finding_actions fa join users fu on fu.id = fa.by_id where fa.batch_id = b.id), '[]') as finding_actions
      ${FROM} join instruments i on i.id = b.instrument_id where b.id = ${id}`.execute(db)
    return rows[0]
  }

  async findByDraft(db: Executor, draftId: string): Promise<string | undefined> {
    const { rows } = await sql<{ id: string }>`select id from batches where draft_id = ${draftId}`.execute(db)
    return rows[0]?.id
  }

  /** Every move of a batch and every reading saved in it passes here, one after another. */
  async lock(trx: Trx, id: string): Promise<LockedBatch> {
    const { rows } = await sql<LockedBatch>`
      select id, number, state, method_id, calibration_id, instrument_id, replicates, colour_started_at, version
      from batches where id = ${id} for update`.execute(trx)
    const [row] = rows
    if (!row) throw notFound('batch')
    return row
  }

  /** @returns undefined when the form was sent before */
  async insert(
    trx: Trx,
    batch: {
      draftId: string
      methodId: string
      calibrationId: string
      instrumentId: string
      replicates: number
      colourStartedAt: string | null
      note: string
      rules: AssessmentRules
      openedBy: string
      lotIds: readonly string[]
    },
  ): Promise<string | undefined> {
    const { rows } = await sql<{ id: string }>`
      insert into batches (number, draft_id, method_id, calibration_id, instrument_id, replicates, colour_started_at, note, rules, opened_by)
      values (next_number('B', 'batch_numbers', 4), ${batch.draftId}, ${batch.methodId}, ${batch.calibrationId},
        ${batch.instrumentId}, ${batch.replicates}, ${batch.colourStartedAt}, ${batch.note},
        ${JSON.stringify(batch.rules)}::jsonb, ${batch.openedBy})
      on conflict (draft_id) do nothing returning id`.execute(trx)
    const id = rows[0]?.id
    if (id !== undefined && batch.lotIds.length > 0) {
      await sql`insert into batch_lots (batch_id, lot_id)
        select ${id}, lot from unnest(${batch.lotIds}::bigint[]) as lot on conflict do nothing`.execute(trx)
    }
    return id
  }

  async change(
    trx: Trx,
    { id, colourStartedAt, note }: { id: string; colourStartedAt: string | null; note: string },
  ): Promise<void> {
    await sql`update batches set colour_started_at = ${colourStartedAt}, note = ${note} where id = ${id}`.execute(
      trx,
    )
  }

  /** After any work at the run: the counts that lists show, and a version that tells others. @returns the new version */
  async settle(
    trx: Trx,
    work: {
      id: string
      state: BatchStateName
      positionsRead: number
      aboveLimit: number
      openFindings: number
    },
  ): Promise<number> {
    const { rows } = await sql<{ version: number }>`
      update batches set state = ${work.state}, positions_read = ${work.positionsRead}, above_limit = ${work.aboveLimit},
        open_findings = ${work.openFindings}, version = version + 1
      where id = ${work.id} returning version`.execute(trx)
    return rows[0]?.version ?? 0
  }

  async insertFindingAction(
    trx: Trx,
    action: { batchId: string; findingId: string; kind: string; text: string; byId: string },
  ): Promise<void> {
    await sql`insert into finding_actions (batch_id, finding_id, kind, text, by_id)
      values (${action.batchId}, ${action.findingId}, ${action.kind}, ${action.text}, ${action.byId})`.execute(
      trx,
    )
  }

  /** One statement on a table without history: it needs no transaction. */
  async watch(db: Executor, batchId: string, userId: string): Promise<void> {
    await sql`insert into batch_watchers (batch_id, user_id) values (${batchId}, ${userId})
      on conflict (batch_id, user_id) do update set seen_at = weirlight_now()
      where batch_watchers.seen_at < weirlight_now() - interval '10 seconds'`.execute(db)
  }

  async listWatchers(db: Executor, batchId: string, exceptUserId: string): Promise<string[]> {
    const { rows } = await sql<{ name: string }>`
      select u.name from batch_watchers w join users u on u.id = w.user_id
      where w.batch_id = ${batchId} and w.user_id <> ${exceptUserId} and w.seen_at > weirlight_now() - interval '1 minute'
      order by u.name`.execute(db)
    return rows.map(({ name }) => name)
  }
}
