import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor, Trx } from '../../platform/index.js'

export interface LaboratoryRow {
  id: string
  name: string
  address: string
  accreditation: string
  timeZone: string
  email: string
  phone: string
  version: number
}

@Injectable()
export class LaboratoryRepository {
  async find(db: Executor): Promise<LaboratoryRow | undefined> {
    const { rows } = await sql<LaboratoryRow>`select * from laboratory where id = 1`.execute(db)
    return rows[0]
  }

  async lock(trx: Trx): Promise<LaboratoryRow | undefined> {
    const { rows } =
      await sql<LaboratoryRow>`select * from laboratory where id = 1 for no key update`.execute(trx)
    return rows[0]
  }

  /** The day it is in the laboratory's zone, by the server's clock. */
  async today(db: Executor): Promise<string> {
    const { rows } = await sql<{ today: string }>`
      select (weirlight_now() at time zone coalesce((select time_zone from laboratory), 'UTC'))::date as today`.execute(
      db,
    )
    return rows[0]?.today ?? ''
  }

  async insert(trx: Trx, row: Omit<LaboratoryRow, 'id' | 'version'>): Promise<void> {
    await sql`insert into laboratory (name, address, accreditation, time_zone, email, phone)
      values (${row.name}, ${row.address}, ${row.accreditation}, ${row.timeZone}, ${row.email}, ${row.phone})
      on conflict (id) do nothing`.execute(trx)
  }

  async update(trx: Trx, row: Omit<LaboratoryRow, 'id' | 'version' | 'timeZone'>): Promise<void> {
    await sql`update laboratory set name = ${row.name}, address = ${row.address}, accreditation = ${row.accreditation},
      email = ${row.email}, phone = ${row.phone}, version = version + 1 where id = 1`.execute(trx)
  }
}
