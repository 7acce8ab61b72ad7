import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Trx } from '../../platform/index.js'
import type { WaitingToOpen } from './batch-rows.js'

/** The samples and determinations that go into a new batch. */
@Injectable()
export class OpeningRepository {
  /** Samples first, then determinations, each in one order: two batches opened at once never wait for each other. */
  async lockWaiting(trx: Trx, ids: readonly string[]): Promise<WaitingToOpen[]> {
    await sql`select id from samples where id in (select sample_id from determinations where id = any(${ids}::bigint[]))
      order by id for update`.execute(trx)
    await sql`select id from determinations where id = any(${ids}::bigint[]) order by id for update`.execute(
      trx,
    )
    const { rows } = await sql<WaitingToOpen>`
      select d.id, d.state, d.method_id, d.sample_id, s.number as sample_number, s.state as sample_state, s.collected_at,
        (select b.number from positions p join batches b on b.id = p.batch_id
          where p.determination_id = d.id and d.state <> 'requested' order by p.id desc limit 1) as batch_number,
        pr.display_unit, pr.ties, pr.non_detect, pr.definition -> 'nonDetectFor' as non_detect_for,
        (pr.definition ->> 'reportedDigits')::int as reported_digits,
        coalesce((
          select jsonb_agg(jsonb_build_object('id', l.id::text, 'name', l.name, 'kind', l.kind, 'value', l.value_text,
            'unit', l.unit, 'digits', l.digits, 'rule', l.decision_rule, 'source', l.source) order by l.id)
          from limits l
          where l.programme_id = pr.id and l.analyte = d.analyte and l.form = d.form
            and (s.collected_at at time zone coalesce((select time_zone from laboratory), 'UTC'))::date >= l.valid_from
            and (l.valid_until is null
              or (s.collected_at at time zone coalesce((select time_zone from laboratory), 'UTC'))::date < l.valid_until)
        ), '[]') as limits
      from determinations d join samples s on s.id = d.sample_id join clients c on c.id = s.client_id
        join programmes pr on pr.id = c.programme_id
      where d.id = any(${ids}::bigint[])`.execute(trx)
    return rows
  }

  async putInBatch(
    trx: Trx,
    move: {
      determinationIds: readonly string[]
      state: string
      sampleIds: readonly string[]
      sampleState: string
    },
  ): Promise<void> {
    await sql`update determinations set state = ${move.state}, version = version + 1
      where id = any(${move.determinationIds}::bigint[])`.execute(trx)
    await sql`update samples set state = ${move.sampleState}, version = version + 1
      where id = any(${move.sampleIds}::bigint[]) and state <> ${move.sampleState}`.execute(trx)
  }
}
