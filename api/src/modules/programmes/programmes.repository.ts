import { Injectable } from '@nestjs/common'
import type { NonDetectRule } from '@weirlight/shared/assay'
import type { limitView } from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import type { z } from 'zod'
import type { Executor } from '../../platform/index.js'

export interface ProgrammeRow {
  id: string
  code: string
  name: string
  displayUnit: 'mg/L' | 'ug/L'
  ties: 'half-up' | 'half-even'
  nonDetect: NonDetectRule
  note: string
}
export type LimitRow = z.infer<typeof limitView> & { programmeId: string }

@Injectable()
export class ProgrammesRepository {
  async list(db: Executor): Promise<ProgrammeRow[]> {
    const { rows } = await sql<ProgrammeRow>`
      select id, code, name, display_unit, ties, non_detect, note from programmes order by name, id`.execute(
      db,
    )
    return rows
  }

  async listLimits(db: Executor): Promise<LimitRow[]> {
    const { rows } = await sql<LimitRow>`
      select id, programme_id, analyte, form, kind, name, value_text as value, unit, digits, decision_rule, source,
        edition, mark, valid_from, valid_until
      from limits order by programme_id, array_position(array['Fe', 'Cu', 'Mn', 'Cr'], analyte), form, valid_from, id`.execute(
      db,
    )
    return rows
  }

  async listClients(db: Executor): Promise<{ id: string; name: string; programmeId: string }[]> {
    const { rows } = await sql<{ id: string; name: string; programmeId: string }>`
      select id, name, programme_id from clients where active order by name, id`.execute(db)
    return rows
  }
}
