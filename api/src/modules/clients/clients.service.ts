import { Injectable } from '@nestjs/common'
import type {
  BodyOf,
  ClientView,
  addClient,
  addPoint,
  changeClient,
  changePoint,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import {
  assertVersion,
  Database,
  type Executor,
  invalidInput,
  isUniqueViolation,
  notFound,
  ProblemError,
} from '../../platform/index.js'
import { ClientsRepository, type ClientListRow } from './clients.repository.js'
import { ContactsRepository, type ContactView } from './contacts.repository.js'
import { PointsRepository } from './points.repository.js'

/** Client utilities and their sampling points. */
@Injectable()
export class ClientsService {
  constructor(
    private readonly db: Database,
    private readonly clients: ClientsRepository,
    private readonly contacts: ContactsRepository,
    private readonly points: PointsRepository,
  ) {}

  async list(): Promise<{ items: ClientListRow[] }> {
    return { items: await this.clients.list(this.db.read) }
  }

  async view(id: string): Promise<ClientView> {
    return this.get(this.db.read, id)
  }

  async get(db: Executor, id: string): Promise<ClientView> {
    const client = await this.clients.find(db, id)
    if (!client) throw notFound('client')
    const contacts = await this.contacts.list(db, id)
    return { ...client, contacts, points: await this.points.list(db, id) }
  }

  /** Whom the laboratory writes to. */
  async listContacts(
    db: Executor,
    clientId: string,
    about: 'alerts' | 'certificates',
  ): Promise<ContactView[]> {
    const contacts = await this.contacts.list(db, clientId)
    return contacts.filter((contact) => (about === 'alerts' ? contact.getsAlerts : contact.getsCertificates))
  }

  async add(actor: Actor, { code, ...values }: BodyOf<typeof addClient>): Promise<ClientView> {
    return this.db.transaction(actor, 'client.add', null, async (trx) => {
      await this.requireProgramme(trx, values.programmeId)
      const id = await this.clients.insert(trx, code, values).catch((error: unknown) => {
        throw codeTaken(error, 'clients_code_key', `There is a client with the code ${code} already.`)
      })
      return this.get(trx, id)
    })
  }

  async change(actor: Actor, id: string, body: BodyOf<typeof changeClient>): Promise<ClientView> {
    return this.db.transaction(actor, 'client.change', body.reason || null, async (trx) => {
      const row = await this.clients.lock(trx, id)
      if (!row) throw notFound('client')
      await assertVersion(trx, { thing: 'clients', id, has: row.version, sent: body.version })
      await this.requireProgramme(trx, body.programmeId)
      if (body.programmeId !== row.programmeId && !body.reason) {
        const message = 'Another programme means other limits. Say why; it is kept in the history.'
        throw invalidInput([{ path: 'reason', message }])
      }
      await this.clients.update(trx, id, body)
      return this.get(trx, id)
    })
  }

  async addPoint(actor: Actor, clientId: string, body: BodyOf<typeof addPoint>): Promise<ClientView> {
    return this.db.transaction(actor, 'client.add-point', null, async (trx) => {
      if (!(await this.clients.lock(trx, clientId))) throw notFound('client')
      await this.points.insert(trx, clientId, body).catch((error: unknown) => {
        const sentence = `This client has a sampling point ${body.code} already.`
        throw codeTaken(error, 'sampling_points_client_id_code_key', sentence)
      })
      return this.get(trx, clientId)
    })
  }

  async changePoint(actor: Actor, id: string, body: BodyOf<typeof changePoint>): Promise<ClientView> {
    return this.db.transaction(actor, 'client.change-point', null, async (trx) => {
      const row = await this.points.lock(trx, id)
      if (!row) throw notFound('sampling point')
      await assertVersion(trx, { thing: 'samplingPoints', id, has: row.version, sent: body.version })
      await this.points.update(trx, id, body)
      return this.get(trx, row.clientId)
    })
  }

  private async requireProgramme(db: Executor, id: string): Promise<void> {
    if (await this.clients.hasProgramme(db, id)) return
    throw invalidInput([{ path: 'programmeId', message: 'There is no such programme.' }])
  }
}

function codeTaken(error: unknown, constraint: string, message: string): unknown {
  if (!isUniqueViolation(error, constraint)) return error
  return new ProblemError('already-exists', message, { errors: [{ path: 'code', message }], cause: error })
}
