import { Injectable } from '@nestjs/common'
import type { listMail, QueryOf, retryMail } from '@weirlight/shared/contracts'
import {
  Database,
  MailService,
  notAllowedNow,
  notFound,
  toPage,
  type AnswerOf,
} from '../../platform/index.js'
import { OutgoingMailRepository, type OutgoingMailRow } from './outgoing-mail.repository.js'

type MailView = AnswerOf<typeof retryMail>

/** Messages that left or should leave: none is lost without being seen. */
@Injectable()
export class OutgoingMailService {
  constructor(
    private readonly db: Database,
    private readonly mail: MailService,
    private readonly messages: OutgoingMailRepository,
  ) {}

  async list(query: QueryOf<typeof listMail>): Promise<AnswerOf<typeof listMail>> {
    const rows = await this.messages.list(this.db.read, query)
    return toPage(rows, { limit: query.limit, key: (row) => [row.id], item: toView })
  }

  async retry(id: string): Promise<MailView> {
    const row = await this.messages.find(this.db.fresh, id)
    if (!row) throw notFound('message')
    return this.db.unwatched(async (trx) => {
      if (!(await this.mail.retry(trx, id)))
        throw notAllowedNow('This message has left or is leaving just now.')
      const retried = await this.messages.find(trx, id)
      return toView(retried ?? row)
    })
  }
}

function toView(row: OutgoingMailRow): MailView {
  const isWaiting = row.state === 'waiting'
  return {
    id: row.id,
    to: row.recipient,
    subject: row.subject,
    state: row.state as MailView['state'],
    attempts: row.attempts,
    lastError: row.lastError ?? '',
    createdAt: row.createdAt.toISOString(),
    sentAt: row.sentAt?.toISOString() ?? null,
    aboutKind: row.aboutKind ?? '',
    aboutId: row.aboutId ?? '',
    nextTryAt: isWaiting ? row.nextAttemptAt.toISOString() : null,
  }
}
