import { Injectable } from '@nestjs/common'
import type { listMail, QueryOf } from '@weirlight/shared/contracts'
import { idFromCursor, type Executor } from '../../platform/index.js'

export type OutgoingMailRow = Awaited<ReturnType<OutgoingMailRepository['list']>>[number]

@Injectable()
export class OutgoingMailRepository {
  private rows(db: Executor) {
    return db
      .selectFrom('mailMessages')
      .select([
        'id',
        'recipient',
        'subject',
        'state',
        'attempts',
        'lastError',
        'createdAt',
        'sentAt',
        'aboutKind',
        'aboutId',
        'nextAttemptAt',
      ])
  }

  async list(db: Executor, { after, limit, state }: QueryOf<typeof listMail>) {
    const before = idFromCursor(after)
    return this.rows(db)
      .$if(before !== undefined, (query) => query.where('id', '<', before ?? ''))
      .$if(state !== undefined, (query) => query.where('state', '=', state ?? ''))
      .orderBy('id', 'desc')
      .limit(limit + 1)
      .execute()
  }

  async find(db: Executor, id: string) {
    return this.rows(db).where('id', '=', id).executeTakeFirst()
  }
}
