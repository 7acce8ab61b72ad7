import { createHash } from 'node:crypto'
import { Injectable } from '@nestjs/common'
import { LIMITS } from '@weirlight/shared/limits'
import { z } from 'zod'
import { Clock } from '../clock/clock.js'
import { Settings } from '../config/settings.js'
import type { Trx } from '../database/executor.js'
import { JobsService } from '../jobs/jobs.service.js'
import { sendMail } from './mail.jobs.js'
import { MailRepository, type MailRow } from './mail.repository.js'

export interface AttachmentReference {
  kind: string
  id: string
}

export interface Attachment {
  filename: string
  content: Buffer
  contentType: string
}

export interface MailToQueue {
  /** names the event that asks for the message: `alert:42:anna@town.example`; queued once for each key */
  key: string
  to: string
  subject: string
  text: string
  html?: string
  attachments?: readonly AttachmentReference[]
  about?: { kind: string; id: string }
  clientId?: string | null
}

const oneLine = z
  .string()
  .min(1)
  .max(250)
  .refine((text) => !/[\r\n]/.test(text), 'A mail header is one line.')
const envelope = z.object({
  key: z.string().min(3).max(300),
  to: z.email().max(LIMITS.emailLength),
  subject: oneLine,
  text: z.string().min(1),
})

/** Writes down that a message must leave; the job sends it. */
@Injectable()
export class MailService {
  private readonly loaders = new Map<string, (id: string) => Promise<Attachment>>()
  private readonly listeners = new Map<string, (id: string) => Promise<void>>()

  constructor(
    private readonly messages: MailRepository,
    private readonly jobs: JobsService,
    private readonly settings: Settings,
    private readonly clock: Clock,
  ) {}

  /** A feature says how its attachments are loaded when a message leaves: `mail.attach('certificate', load)`. */
  attach(kind: string, load: (id: string) => Promise<Attachment>): void {
    this.loaders.set(kind, load)
  }

  /** A feature says what follows when a message about its thing has left: `mail.whenSent('alert', notify)`. */
  whenSent(aboutKind: string, listener: (aboutId: string) => Promise<void>): void {
    this.listeners.set(aboutKind, listener)
  }

  async tellSent({
    aboutKind,
    aboutId,
  }: {
    aboutKind: string | null
    aboutId: string | null
  }): Promise<void> {
    if (aboutKind !== null && aboutId !== null) await this.listeners.get(aboutKind)?.(aboutId)
  }

  async load({ kind, id }: AttachmentReference): Promise<Attachment> {
    const loader = this.loaders.get(kind)
    if (!loader) throw new Error(`Nobody knows how to attach a ${kind}.`)
    return loader(id)
  }

  /**
   * In the transaction of the change that asks for it. The same key again queues nothing.
   * While the demonstration's past is loaded (pinned clock) the message is kept as sent, and does not leave.
   */
  async queue(trx: Trx, mail: MailToQueue): Promise<void> {
    envelope.parse(mail)
    const isPast = this.clock.pinnedAt !== undefined
    const id = await this.messages.insert(trx, {
      key: mail.key,
      messageId: this.messageId(mail.key),
      recipient: mail.to,
      subject: mail.subject,
      bodyText: mail.text,
      bodyHtml: mail.html ?? null,
      attachments: JSON.stringify(mail.attachments ?? []),
      aboutKind: mail.about?.kind ?? null,
      aboutId: mail.about?.id ?? null,
      clientId: mail.clientId ?? null,
      state: isPast ? 'sent' : 'waiting',
      sentAt: isPast ? this.clock.now() : null,
    })
    if (id !== undefined && !isPast) await this.jobs.enqueue(trx, sendMail, { id })
  }

  /** Tries a failed message again now. @returns undefined when it has left or is leaving */
  async retry(trx: Trx, id: string): Promise<MailRow | undefined> {
    const row = await this.messages.retry(trx, id)
    if (row) await this.jobs.enqueue(trx, sendMail, { id })
    return row
  }

  /** The same for the same key, so that a mail server may tell a repeated message. */
  private messageId(key: string): string {
    const { hostname } = new URL(this.settings.publicUrl)
    return `<${createHash('sha256').update(key).digest('hex').slice(0, 40)}@${hostname}>`
  }
}
