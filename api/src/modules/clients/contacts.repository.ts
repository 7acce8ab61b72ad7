import { Injectable } from '@nestjs/common'
import type { contactView } from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import type { z } from 'zod'
import type { Executor, Trx } from '../../platform/index.js'

export type ContactView = z.infer<typeof contactView>
export type ContactRow = ContactView & { clientId: string; active: boolean }
export type ContactValues = Omit<ContactView, 'id' | 'version'>

@Injectable()
export class ContactsRepository {
  async list(db: Executor, clientId: string): Promise<ContactView[]> {
    const { rows } = await sql<ContactView>`
      select id, name, email, gets_alerts, gets_certificates, version from contacts
      where client_id = ${clientId} and active order by lower(name), id`.execute(db)
    return rows
  }

  async lock(trx: Trx, id: string): Promise<ContactRow | undefined> {
    const { rows } = await sql<ContactRow>`
      select id, client_id, name, email, gets_alerts, gets_certificates, active, version from contacts
      where id = ${id} for no key update`.execute(trx)
    return rows[0]
  }

  /** Whether the utility writes to this address already, as somebody else. */
  async hasAddress(
    db: Executor,
    { clientId, email, besides }: { clientId: string; email: string; besides: string | null },
  ): Promise<boolean> {
    const { rows } =
      await sql`select 1 from contacts where client_id = ${clientId} and active and email = ${email}
      and id is distinct from ${besides}::bigint`.execute(db)
    return rows.length > 0
  }

  async insert(trx: Trx, clientId: string, row: ContactValues): Promise<void> {
    await sql`insert into contacts (client_id, name, email, gets_alerts, gets_certificates)
      values (${clientId}, ${row.name}, ${row.email}, ${row.getsAlerts}, ${row.getsCertificates})`.execute(
      trx,
    )
  }

  async update(trx: Trx, id: string, row: ContactValues): Promise<void> {
    await sql`update contacts set name = ${row.name}, email = ${row.email}, gets_alerts = ${row.getsAlerts},
      gets_certificates = ${row.getsCertificates}, version = version + 1 where id = ${id}`.execute(trx)
  }

  async retire(trx: Trx, id: string): Promise<void> {
    await sql`update contacts set active = false, version = version + 1 where id = ${id}`.execute(trx)
  }
}
