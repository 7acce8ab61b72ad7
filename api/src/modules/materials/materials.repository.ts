import { Injectable } from '@nestjs/common'
import type { AnalyteCode, materialRow, materialView } from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import type { z } from 'zod'
import type { Executor, Trx } from '../../platform/index.js'

export type MaterialRow = z.infer<typeof materialRow>
type MaterialView = z.infer<typeof materialView>
export type MaterialKind = MaterialRow['kind']
export type MaterialDetails = MaterialRow &
  Pick<MaterialView, 'certificateRef' | 'recipe' | 'storage' | 'hazards'> & {
    preparedById: string | null
    preparedByName: string | null
    preparedAt: Date
  }
export type UsedIn = MaterialView['usedIn']

export interface NewLot {
  kind: MaterialKind
  name: string
  analyte: AnalyteCode | null
  concentration: string | null
  uncertainty: string | null
  lotCode: string
  producer: string
  certificateRef: string
  receivedOn: string
  openedOn: string | null
  expiresOn: string
  parentId: string | null
  recipe: string
  storage: string
  hazards: string
  preparedBy: string
}

const today = sql`(weirlight_now() at time zone coalesce((select time_zone from laboratory), 'UTC'))::date`
/** The day of expiry is the last day of use. */
const usable = sql`l.state = 'in-use' and l.expires_on >= ${today}`
const columns = sql`l.id, l.number, l.kind, l.name, l.analyte, l.concentration, l.uncertainty, l.lot_code, l.producer,
  l.received_on, l.opened_on, l.expires_on, l.parent_id, p.number as parent_number, l.state, ${usable} as usable, l.version`
const source = sql`material_lots l left join material_lots p on p.id = l.parent_id`

@Injectable()
export class MaterialsRepository {
  async list(
    db: Executor,
    filter: {
      kind?: MaterialKind | undefined
      analyte?: AnalyteCode | undefined
      isUsable?: boolean
      ids?: readonly string[]
    },
  ): Promise<MaterialRow[]> {
    const { rows } = await sql<MaterialRow>`select ${columns} from ${source}
      where (${filter.kind ?? null}::text is null or l.kind = ${filter.kind ?? null})
        and (${filter.analyte ?? null}::text is null or l.analyte = ${filter.analyte ?? null} or l.analyte is null)
        and (not ${filter.isUsable ?? false} or (${usable}))
        and (${filter.ids ?? null}::bigint[] is null or l.id = any(${filter.ids ?? null}::bigint[]))
      order by (${usable}) desc, l.id desc`.execute(db)
    return rows
  }

  async find(db: Executor, id: string): Promise<MaterialDetails | undefined> {
    const { rows } = await sql<MaterialDetails>`
      select ${columns}, l.certificate_ref, l.recipe, l.storage, l.hazards, l.prepared_at,
        u.id as prepared_by_id, u.name as prepared_by_name
      from ${source} left join users u on u.id = l.prepared_by where l.id = ${id}`.execute(db)
    return rows[0]
  }

  async lock(trx: Trx, id: string): Promise<MaterialRow | undefined> {
    const { rows } = await sql<MaterialRow>`select ${columns} from ${source} where l.id = ${id}
      for no key update of l`.execute(trx)
    return rows[0]
  }

  /** The lots it was made from, nearest first, back to the one that was bought. */
  async listAncestry(db: Executor, id: string): Promise<MaterialRow[]> {
    const { rows } = await sql<MaterialRow>`
      with recursive line as (
        select parent_id, 1 as depth from material_lots where id = ${id}
        union all
        select m.parent_id, line.depth + 1 from line join material_lots m on m.id = line.parent_id
        where line.depth < 50
      )
      select ${columns} from line join material_lots l on l.id = line.parent_id
        left join material_lots p on p.id = l.parent_id
      order by line.depth`.execute(db)
    return rows
  }

  /** What it touched itself, newest first: lots made from it, calibrations, batches. */
  async listUses(db: Executor, id: string): Promise<UsedIn> {
    const { rows } = await sql<UsedIn[number]>`
      select kind, id, number from (
        select 'lot' as kind, id, number from material_lots where parent_id = ${id}
        union
        select 'calibration', c.id, c.number from calibrations c
        where c.stock_lot_id = ${id}
          or c.id in (select calibration_id from calibration_lots where lot_id = ${id})
          or c.id in (select calibration_id from calibration_standards where lot_id = ${id})
        union
        select 'batch', b.id, b.number from batches b
        where b.id in (select batch_id from batch_lots where lot_id = ${id})
          or b.id in (select batch_id from positions where lot_id = ${id})
      ) used order by array_position(array['lot', 'calibration', 'batch'], kind), id desc limit 500`.execute(
      db,
    )
    return rows
  }

  async insert(trx: Trx, lot: NewLot): Promise<string> {
    const number =
      lot.kind === 'reagent'
        ? sql`next_number('R', 'reagent_numbers', 4)`
        : sql`next_number('W', 'standard_numbers', 4)`
    const { rows } = await sql<{ id: string }>`
      insert into material_lots (number, kind, name, analyte, concentration, uncertainty, lot_code, producer,
        certificate_ref, received_on, opened_on, expires_on, parent_id, recipe, storage, hazards, prepared_by, prepared_at)
      values (${number}, ${lot.kind}, ${lot.name}, ${lot.analyte}, ${lot.concentration}, ${lot.uncertainty},
        ${lot.lotCode}, ${lot.producer}, ${lot.certificateRef}, ${lot.receivedOn}, ${lot.openedOn}, ${lot.expiresOn},
        ${lot.parentId}, ${lot.recipe}, ${lot.storage}, ${lot.hazards}, ${lot.preparedBy}, weirlight_now())
      returning id`.execute(trx)
    return rows[0]?.id ?? ''
  }

  async setState(trx: Trx, id: string, state: 'used-up' | 'withdrawn'): Promise<void> {
    await sql`update material_lots set state = ${state}, version = version + 1 where id = ${id}`.execute(trx)
  }
}
