import type { ClockDefinition, LimitDefinition, ProgrammeDefinition } from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import type { Trx } from '../../platform/index.js'

/** Writes the shipped catalogue; a row that is as it should be is left alone, so that history stays short. */
export class ReferenceRepository {
  async putProgramme(trx: Trx, programme: ProgrammeDefinition): Promise<{ id: string; isChanged: boolean }> {
    const { rows } = await sql<{ id: string }>`
      insert into programmes (code, name, display_unit, ties, non_detect, note, definition)
      values (${programme.code}, ${programme.name}, ${programme.displayUnit}, ${programme.rounding.ties},
        ${programme.nonDetect}, ${programme.note}, ${JSON.stringify(programme)}::jsonb)
      on conflict (code) do update set name = excluded.name, display_unit = excluded.display_unit,
        ties = excluded.ties, non_detect = excluded.non_detect, note = excluded.note,
        definition = excluded.definition, version = programmes.version + 1
      where programmes.definition is distinct from excluded.definition
      returning id`.execute(trx)
    const [changed] = rows
    if (changed) return { id: changed.id, isChanged: true }
    const found = await sql<{ id: string }>`select id from programmes where code = ${programme.code}`.execute(
      trx,
    )
    return { id: found.rows[0]?.id ?? '', isChanged: false }
  }

  async putLimit(trx: Trx, programmeId: string, limit: LimitDefinition): Promise<boolean> {
    const { rows } = await sql`
      insert into limits (programme_id, code, analyte, form, kind, name, value, value_text, unit, digits,
        decision_rule, guard_factor, raises_alert, source, edition, mark, valid_from, valid_until, definition)
      values (${programmeId}, ${limit.code}, ${limit.analyte}, ${limit.form}, ${limit.kind}, ${limit.name},
        ${limit.value}::numeric, ${limit.value}, ${limit.unit}, ${limit.digits}, ${limit.decisionRule},
        ${limit.guardFactor}, ${limit.raisesAlert}, ${limit.source}, ${limit.edition}, ${limit.mark},
        ${limit.validFrom}, ${limit.validUntil}, ${JSON.stringify(limit)}::jsonb)
      on conflict (programme_id, code) do update set analyte = excluded.analyte, form = excluded.form,
        kind = excluded.kind, name = excluded.name, value = excluded.value, value_text = excluded.value_text,
        unit = excluded.unit, digits = excluded.digits, decision_rule = excluded.decision_rule,
        guard_factor = excluded.guard_factor, raises_alert = excluded.raises_alert, source = excluded.source,
        edition = excluded.edition, mark = excluded.mark, valid_from = excluded.valid_from,
        valid_until = excluded.valid_until, definition = excluded.definition
      where limits.definition is distinct from excluded.definition
      returning id`.execute(trx)
    return rows.length > 0
  }

  async putClock(trx: Trx, clock: ClockDefinition): Promise<boolean> {
    const { rows } = await sql`
      insert into clocks (code, jurisdiction, duty, who, starting_event, hours, applies_to, source, edition, mark, definition)
      values (${clock.code}, ${clock.jurisdiction}, ${clock.duty}, ${clock.who}, ${clock.startingEvent}, ${clock.hours},
        ${clock.appliesTo}, ${clock.source}, ${clock.edition}, ${clock.mark}, ${JSON.stringify(clock)}::jsonb)
      on conflict (code) do update set jurisdiction = excluded.jurisdiction, duty = excluded.duty, who = excluded.who,
        starting_event = excluded.starting_event, hours = excluded.hours, applies_to = excluded.applies_to,
        source = excluded.source, edition = excluded.edition, mark = excluded.mark, definition = excluded.definition
      where clocks.definition is distinct from excluded.definition
      returning id`.execute(trx)
    return rows.length > 0
  }
}
