import { Injectable, Logger } from '@nestjs/common'
import { z } from 'zod'
import { Database } from '../database/database.js'
import { JobHandler } from '../jobs/job-handler.decorator.js'
import { JobsService } from '../jobs/jobs.service.js'
import { MailTransport } from './mail-transport.js'
import { sendMail, sweepMail } from './mail.jobs.js'
import { MailRepository, type MailRow } from './mail.repository.js'
import { MailService } from './mail.service.js'

/** with the waiting times below: about nine hours of trying */
const TRIES = 14
const TRIES_WHEN_REFUSED = 3
const references = z.array(z.object({ kind: z.string(), id: z.string() }))

/**
 * Claims a message in a short transaction, speaks to the mail server outside any, marks it in another. A
 * process that dies before the mail server took the message leaves a claim that runs out; one that dies in
 * the moment after it was taken sends again with the same Message-ID: never lost, twice only there.
 */
@Injectable()
export class MailSender {
  private readonly logger = new Logger(MailSender.name)

  constructor(
    private readonly db: Database,
    private readonly messages: MailRepository,
    private readonly mail: MailService,
    private readonly transport: MailTransport,
    private readonly jobs: JobsService,
  ) {}

  @JobHandler(sendMail)
  async send({ id }: { id: string }): Promise<void> {
    const row = await this.db.unwatched((trx) => this.messages.claim(trx, id))
    if (!row) return
    try {
      const attachments = await Promise.all(
        references.parse(row.attachments).map((one) => this.mail.load(one)),
      )
      await this.transport.send({
        messageId: row.messageId,
        to: row.recipient,
        subject: row.subject,
        text: row.bodyText,
        html: row.bodyHtml ?? undefined,
        attachments,
      })
    } catch (error) {
      await this.postpone(row, error)
      return
    }
    await this.db.unwatched((trx) => this.messages.markSent(trx, row))
    await this.mail.tellSent(row)
  }

  @JobHandler(sweepMail)
  async sweep(): Promise<void> {
    const due = await this.messages.listDue(this.db.fresh, 200)
    if (due.length === 0) return
    await this.db.unwatched(async (trx) => {
      for (const id of due) await this.jobs.enqueue(trx, sendMail, { id })
    })
  }

  private async postpone(row: MailRow, error: unknown): Promise<void> {
    const message = (error instanceof Error ? error.message : String(error)).slice(0, 1000)
    this.logger.warn(`Message ${row.id} did not leave (try ${row.attempts}): ${message}`)
    const isLast = row.attempts >= (isRefused(error) ? TRIES_WHEN_REFUSED : TRIES)
    await this.db.unwatched(async (trx) => {
      if (isLast) return this.messages.markFailed(trx, row, message)
      const afterSeconds = Math.min(15 * 2 ** (row.attempts - 1), 3600)
      await this.messages.markWaiting(trx, row, { afterSeconds, error: message })
      await this.jobs.enqueue(trx, sendMail, { id: row.id }, { startAfterSeconds: afterSeconds + 1 })
    })
  }
}

/** The server answered for good (5xx): trying for hours will not help. */
function isRefused(error: unknown): boolean {
  if (typeof error !== 'object' || error === null || !('responseCode' in error)) return false
  return typeof error.responseCode === 'number' && error.responseCode >= 500
}
