import { Injectable } from '@nestjs/common'
import type {
  BodyOf,
  ClientView,
  addContact,
  changeContact,
  removeContact,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import {
  assertVersion,
  Database,
  invalidInput,
  MailService,
  notAllowedNow,
  notFound,
  type Trx,
} from '../../platform/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { ClientsRepository } from './clients.repository.js'
import { ClientsService } from './clients.service.js'
import { ContactsRepository, type ContactRow } from './contacts.repository.js'
import { contactMovedMail, contactRemovedMail } from './mails/contact.mail.js'

/** Whom a utility's alerts and certificates go to. Whoever stops getting them is told, at the address they had. */
@Injectable()
export class ContactsService {
  constructor(
    private readonly db: Database,
    private readonly clients: ClientsRepository,
    private readonly contacts: ContactsRepository,
    private readonly views: ClientsService,
    private readonly laboratory: LaboratoryService,
    private readonly mail: MailService,
  ) {}

  async add(actor: Actor, clientId: string, body: BodyOf<typeof addContact>): Promise<ClientView> {
    return this.db.transaction(actor, 'client.add-contact', null, async (trx) => {
      // the client's lock orders two who add the same address at once
      if (!(await this.clients.lock(trx, clientId))) throw notFound('client')
      await this.requireNewAddress(trx, { clientId, email: body.email, besides: null })
      await this.contacts.insert(trx, clientId, body)
      return this.views.get(trx, clientId)
    })
  }

  async change(actor: Actor, id: string, body: BodyOf<typeof changeContact>): Promise<ClientView> {
    return this.db.transaction(actor, 'client.change-contact', null, async (trx) => {
      const row = await this.lock(trx, id, body.version)
      await this.clients.lock(trx, row.clientId)
      await this.requireNewAddress(trx, { clientId: row.clientId, email: body.email, besides: id })
      await this.contacts.update(trx, id, body)
      if (body.email !== row.email)
        await this.tell(trx, row, contactMovedMail, { newEmail: body.email, by: actor.name })
      return this.views.get(trx, row.clientId)
    })
  }

  async remove(
    actor: Actor,
    id: string,
    { version, reason }: BodyOf<typeof removeContact>,
  ): Promise<ClientView> {
    return this.db.transaction(actor, 'client.remove-contact', reason, async (trx) => {
      const row = await this.lock(trx, id, version)
      await this.contacts.retire(trx, id)
      await this.tell(trx, row, contactRemovedMail, { newEmail: '', by: actor.name })
      return this.views.get(trx, row.clientId)
    })
  }

  private async lock(trx: Trx, id: string, version: number): Promise<ContactRow> {
    const row = await this.contacts.lock(trx, id)
    if (!row) throw notFound('contact')
    await assertVersion(trx, { thing: 'contacts', id, has: row.version, sent: version })
    if (!row.active) throw notAllowedNow('Nothing is sent to this contact any more; add it again instead.')
    return row
  }

  private async requireNewAddress(
    trx: Trx,
    asked: { clientId: string; email: string; besides: string | null },
  ): Promise<void> {
    if (!(await this.contacts.hasAddress(trx, asked))) return
    throw invalidInput([{ path: 'email', message: 'This client has a contact with this address already.' }])
  }

  private async tell(
    trx: Trx,
    row: ContactRow,
    write: typeof contactMovedMail,
    facts: { newEmail: string; by: string },
  ): Promise<void> {
    const [client, laboratory] = [await this.views.get(trx, row.clientId), await this.laboratory.find(trx)]
    await this.mail.queue(trx, {
      key: `contact-changed:${row.id}:${row.version}`,
      to: row.email,
      ...write({
        ...facts,
        name: row.name,
        clientName: client.name,
        laboratoryName: laboratory?.name ?? 'the laboratory',
        laboratoryPhone: laboratory?.phone ?? '',
        laboratoryEmail: laboratory?.email ?? '',
        getsAlerts: row.getsAlerts,
        getsCertificates: row.getsCertificates,
      }),
      about: { kind: 'client', id: row.clientId },
      clientId: row.clientId,
    })
  }
}
