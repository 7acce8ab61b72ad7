import { Injectable } from '@nestjs/common'
import type { MethodRecord, methodRow } from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import type { z } from 'zod'
import type { Executor, Trx } from '../../platform/index.js'

export type MethodRow = z.infer<typeof methodRow>

const columns = sql`m.id, m.code, m.edition, m.title, m.analyte, m.form, m.wavelength_nm::float8 as wavelength_nm, m.active,
  (select count(*)::int from calibrations c where c.method_id = m.id and c.state = 'in-force'
    and (c.valid_until is null or c.valid_until > weirlight_now())) as calibrations_in_force,
  (select count(*)::int from determinations d where d.method_id = m.id and d.state = 'requested') as determinations_waiting`

@Injectable()
export class MethodsRepository {
  async list(db: Executor): Promise<MethodRow[]> {
    const { rows } = await sql<MethodRow>`select ${columns} from methods m
      order by not m.active, array_position(array['Fe', 'Cu', 'Mn', 'Cr'], m.analyte), m.title, m.id`.execute(
      db,
    )
    return rows
  }

  async find(db: Executor, id: string): Promise<(MethodRow & { definition: MethodRecord }) | undefined> {
    const { rows } = await sql<MethodRow & { definition: MethodRecord }>`
      select ${columns}, m.definition from methods m where m.id = ${id}`.execute(db)
    return rows[0]
  }

  /** `active` is the laboratory's own choice once the row is there. @returns whether anything changed */
  async put(trx: Trx, method: MethodRecord): Promise<boolean> {
    const { rows } = await sql`
      insert into methods (code, edition, title, analyte, form, wavelength_nm, definition, active)
      values (${method.code}, ${method.edition}, ${method.title}, ${method.analyte}, ${method.form},
        ${method.wavelengthNm}, ${JSON.stringify(method)}::jsonb, ${method.availability === 'standard'})
      on conflict (code, edition) do update set title = excluded.title, analyte = excluded.analyte,
        form = excluded.form, wavelength_nm = excluded.wavelength_nm, definition = excluded.definition,
        version = methods.version + 1
      where methods.definition is distinct from excluded.definition
      returning id`.execute(trx)
    return rows.length > 0
  }
}
