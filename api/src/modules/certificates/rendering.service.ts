import { createHash } from 'node:crypto'
import { Injectable, type OnModuleInit } from '@nestjs/common'
import { paths } from '@weirlight/shared/paths'
import {
  Database,
  DocumentsService,
  JobHandler,
  JobsService,
  MailService,
  Settings,
  SYSTEM,
} from '../../platform/index.js'
import { snapshotOf } from './certificate-view.js'
import { CertificatesRepository } from './certificates.repository.js'
import { certificateDocument } from './documents/certificate-document.js'
import { renderCertificate, sweepCertificates } from './jobs/certificates.jobs.js'
import { certificateMail } from './mails/certificate-mail.js'

/** Makes the document once, keeps it with its hash, and mails it; a second run changes nothing. */
@Injectable()
export class RenderingService implements OnModuleInit {
  constructor(
    private readonly db: Database,
    private readonly documents: DocumentsService,
    private readonly jobs: JobsService,
    private readonly mail: MailService,
    private readonly settings: Settings,
    private readonly certificates: CertificatesRepository,
  ) {}

  onModuleInit(): void {
    this.mail.attach('certificate', async (id) => {
      const document = await this.certificates.document(this.db.fresh, id)
      if (!document) throw new Error(`Certificate ${id} has no document to attach yet.`)
      return { filename: `${document.number}.pdf`, content: document.pdf, contentType: 'application/pdf' }
    })
  }

  @JobHandler(renderCertificate)
  async render({ id }: { id: string }): Promise<void> {
    const row = await this.certificates.find(this.db.fresh, { id, clientId: null })
    if (!row || row.sha256 !== null) return
    const snapshot = snapshotOf(row)
    const pdf = await this.documents.render(certificateDocument(snapshot))
    const sha256 = createHash('sha256').update(pdf).digest('hex')
    const link = new URL(paths.portalCertificate(id), this.settings.publicUrl).href
    await this.db.transaction(SYSTEM, 'certificate.render', null, async (trx) => {
      await this.certificates.keepDocument(trx, { certificateId: id, pdf, sha256 })
      for (const to of await this.certificates.recipients(trx, {
        clientId: row.clientId,
        amendsId: row.amendsId,
      })) {
        await this.mail.queue(trx, {
          key: `certificate:${id}:${to}`,
          to,
          ...certificateMail({ snapshot, link }),
          attachments: [{ kind: 'certificate', id }],
          about: { kind: 'certificate', id },
          clientId: row.clientId,
        })
      }
    })
  }

  /** Every certificate without a document, here and now: for the loader of the demonstration's past. */
  async sweepNow(): Promise<void> {
    const ids = await this.certificates.unrendered(this.db.fresh)
    // one after another: the time limit of a document runs while it waits for a thread
    for (const id of ids) await this.render({ id })
  }

  @JobHandler(sweepCertificates)
  async sweep(): Promise<void> {
    const ids = await this.certificates.unrendered(this.db.fresh)
    if (ids.length === 0) return
    await this.db.unwatched(async (trx) => {
      for (const id of ids) await this.jobs.enqueue(trx, renderCertificate, { id })
    })
  }
}
