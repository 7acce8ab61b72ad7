import { Injectable } from '@nestjs/common'
import type { clientRow } from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import type { z } from 'zod'
import type { Executor, Trx } from '../../platform/index.js'

export type ClientListRow = z.infer<typeof clientRow>

export interface ClientRow {
  id: string
  code: string
  name: string
  systemId: string
  address: string
  programmeId: string
  programmeName: string
  agencyName: string
  agencyPhone: string
  active: boolean
  version: number
}
export type ClientValues = Omit<ClientRow, 'id' | 'code' | 'programmeName' | 'active' | 'version'>

@Injectable()
export class ClientsRepository {
  async list(db: Executor): Promise<ClientListRow[]> {
    const { rows } = await sql<ClientListRow>`
      select c.id, c.code, c.name, c.programme_id, p.name as programme_name, c.active,
        (select count(*)::int from sampling_points s where s.client_id = c.id and s.active) as point_count,
        (select count(*)::int from contacts k where k.client_id = c.id and k.active and k.gets_alerts) as alert_contact_count
      from clients c join programmes p on p.id = c.programme_id
      order by lower(c.name), c.id`.execute(db)
    return rows
  }

  async find(db: Executor, id: string): Promise<ClientRow | undefined> {
    const { rows } = await sql<ClientRow>`
      select c.id, c.code, c.name, c.system_id, c.address, c.programme_id, p.name as programme_name, c.agency_name,
        c.agency_phone, c.active, c.version
      from clients c join programmes p on p.id = c.programme_id where c.id = ${id}`.execute(db)
    return rows[0]
  }

  async lock(
    trx: Trx,
    id: string,
  ): Promise<{ id: string; version: number; programmeId: string } | undefined> {
    const { rows } = await sql<{ id: string; version: number; programmeId: string }>`
      select id, version, programme_id from clients where id = ${id} for no key update`.execute(trx)
    return rows[0]
  }

  async hasProgramme(db: Executor, id: string): Promise<boolean> {
    const { rows } = await sql`select 1 from programmes where id = ${id}`.execute(db)
    return rows.length > 0
  }

  async insert(trx: Trx, code: string, row: ClientValues): Promise<string> {
    const { rows } = await sql<{ id: string }>`
      insert into clients (code, name, system_id, address, programme_id, agency_name, agency_phone)
      values (${code}, ${row.name}, ${row.systemId}, ${row.address}, ${row.programmeId}, ${row.agencyName},
        ${row.agencyPhone}) returning id`.execute(trx)
    return rows[0]?.id ?? ''
  }

  async update(trx: Trx, id: string, row: ClientValues): Promise<void> {
    await sql`update clients set name = ${row.name}, system_id = ${row.systemId}, address = ${row.address},
      programme_id = ${row.programmeId}, agency_name = ${row.agencyName}, agency_phone = ${row.agencyPhone},
      version = version + 1 where id = ${id}`.execute(trx)
  }
}
