import { Injectable } from '@nestjs/common'
import type {
  amendCertificate,
  BodyOf,
  CertificateView,
  checkCertificate,
  listCertificates,
  QueryOf,
  withdrawCertificate,
} from '@weirlight/shared/contracts'
import { paths } from '@weirlight/shared/paths'
import type { Actor } from '@weirlight/shared/permissions'
import { certificateStates, type CertificateState } from '@weirlight/shared/states'
import {
  assertVersion,
  Clock,
  Database,
  MailService,
  notAllowedNow,
  notFound,
  Settings,
  toPage,
  type AnswerOf,
  type Executor,
  type FileAnswer,
} from '../../platform/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { SigningService } from '../users/index.js'
import { snapshotOf, toCertificateRow, toCertificateView } from './certificate-view.js'
import { CertificatesRepository } from './certificates.repository.js'
import { IssuingService } from './issuing.service.js'
import { certificateMail, withdrawnMail } from './mails/certificate-mail.js'

@Injectable()
export class CertificatesService {
  constructor(
    private readonly db: Database,
    private readonly clock: Clock,
    private readonly mail: MailService,
    private readonly settings: Settings,
    private readonly laboratory: LaboratoryService,
    private readonly signing: SigningService,
    private readonly issuing: IssuingService,
    private readonly certificates: CertificatesRepository,
  ) {}

  async list(
    actor: Actor,
    query: QueryOf<typeof listCertificates>,
  ): Promise<AnswerOf<typeof listCertificates>> {
    const scoped = actor.role === 'client' ? { ...query, clientId: actor.clientId ?? '0' } : query
    const rows = await this.certificates.list(this.db.read, scoped)
    return toPage(rows, { limit: query.limit, key: (row) => [row.id], item: toCertificateRow })
  }

  async get(actor: Actor, id: string): Promise<CertificateView> {
    return this.view(this.db.read, { id, actor })
  }

  /** The stored document, as issued. That a client opened it is kept. */
  async document(actor: Actor, id: string): Promise<FileAnswer> {
    const row = await this.certificates.find(this.db.fresh, { id, clientId: actor.clientId })
    if (!row) throw notFound('certificate')
    const document = await this.certificates.document(this.db.fresh, id)
    if (!document) throw notAllowedNow('The document is being made; it will be here in a moment.')
    if (actor.role === 'client') {
      await this.db.transaction(actor, 'certificate.open', null, (trx) =>
        this.certificates.recordOpening(trx, { certificateId: id, userId: actor.userId }),
      )
    }
    return {
      content: document.pdf,
      mediaType: 'application/pdf',
      filename: `${document.number}.pdf`,
      isInline: true,
    }
  }

  async issue(actor: Actor, sampleId: string, body: { version: number }): Promise<CertificateView> {
    return this.db.transaction(actor, 'certificate.issue', null, async (trx) => {
      const sample = await this.certificates.lockSample(trx, sampleId)
      await assertVersion(trx, { thing: 'samples', id: sampleId, has: sample.version, sent: body.version })
      const current = await this.certificates.lockCurrent(trx, sampleId)
      if (current)
        throw notAllowedNow(`Certificate ${current.number} is current. Amend it where something has changed.`)
      const id = await this.issuing.require(trx, { actor, sampleId, reason: '' })
      return this.view(trx, { id, actor })
    })
  }

  async amend(actor: Actor, id: string, body: BodyOf<typeof amendCertificate>): Promise<CertificateView> {
    await this.signing.confirmPassphrase(actor, body.passphrase)
    return this.db.transaction(actor, 'certificate.amend', body.reason, async (trx) => {
      const row = await this.certificates.lock(trx, id)
      await assertVersion(trx, { thing: 'certificates', id, has: row.version, sent: body.version })
      certificateStates.move(row.state as CertificateState, 'supersede')
      const amendedId = await this.issuing.require(trx, {
        actor,
        sampleId: row.sampleId,
        reason: body.reason,
      })
      const amended = await this.certificates.find(trx, { id: amendedId, clientId: null })
      await this.signing.sign(trx, {
        actor,
        thing: 'certificates',
        thingId: amendedId,
        meaning: 'amended',
        content: amended?.snapshot,
      })
      return this.view(trx, { id: amendedId, actor })
    })
  }

  async withdraw(
    actor: Actor,
    id: string,
    body: BodyOf<typeof withdrawCertificate>,
  ): Promise<CertificateView> {
    return this.db.transaction(actor, 'certificate.withdraw', body.reason, async (trx) => {
      const row = await this.certificates.lock(trx, id)
      await assertVersion(trx, { thing: 'certificates', id, has: row.version, sent: body.version })
      certificateStates.move(row.state as CertificateState, 'withdraw')
      await this.certificates.move(trx, { id, state: 'withdrawn', reason: body.reason })
      const deliveries = await this.certificates.deliveries(trx, id)
      for (const to of new Set(deliveries.map((mail) => mail.recipient))) {
        await this.mail.queue(trx, {
          key: `certificate-withdrawn:${id}:${to}`,
          to,
          ...withdrawnMail({ snapshot: snapshotOf(row), reason: body.reason }),
          about: { kind: 'certificate', id },
          clientId: row.clientId,
        })
      }
      return this.view(trx, { id, actor })
    })
  }

  async sendAgain(actor: Actor, id: string): Promise<CertificateView> {
    return this.db.transaction(actor, 'certificate.send-again', null, async (trx) => {
      const row = await this.certificates.lock(trx, id)
      if (row.state !== 'issued') throw notAllowedNow('Only the current certificate is sent.')
      const document = await this.certificates.document(trx, id)
      if (!document)
        throw notAllowedNow('The document is being made; it leaves by itself as soon as it is there.')
      const link = new URL(paths.portalCertificate(id), this.settings.publicUrl).href
      const minute = this.clock.now().toISOString().slice(0, 16)
      for (const to of await this.certificates.recipients(trx, { clientId: row.clientId, amendsId: null })) {
        await this.mail.queue(trx, {
          // one more message a minute at most, however often the button is pressed
          key: `certificate:${id}:${to}:again:${minute}`,
          to,
          ...certificateMail({ snapshot: snapshotOf(row), link }),
          attachments: [{ kind: 'certificate', id }],
          about: { kind: 'certificate', id },
          clientId: row.clientId,
        })
      }
      return this.view(trx, { id, actor })
    })
  }

  /** Anyone may ask; the answer says nothing of client or results. */
  async check(code: string): Promise<AnswerOf<typeof checkCertificate>> {
    const row = await this.certificates.byCode(this.db.read, code)
    const laboratory = await this.laboratory.find(this.db.read)
    return {
      found: row !== undefined,
      number: row?.number ?? null,
      state: (row?.state ?? null) as CertificateState | null,
      issuedAt: row?.issuedAt.toISOString() ?? null,
      laboratoryName: laboratory?.name ?? null,
      timeZone: laboratory?.timeZone ?? null,
      sha256: row?.sha256 ?? null,
      replacedBy: row?.replacedBy ?? null,
    }
  }

  private async view(db: Executor, { id, actor }: { id: string; actor: Actor }): Promise<CertificateView> {
    const row = await this.certificates.find(db, { id, clientId: actor.clientId })
    if (!row) throw notFound('certificate')
    return toCertificateView({
      row,
      deliveries: await this.certificates.deliveries(db, id),
      openings: await this.certificates.openings(db, id),
      neighbours: await this.certificates.neighbours(db, { id, amendsId: row.amendsId }),
      isClient: actor.role === 'client',
    })
  }
}
