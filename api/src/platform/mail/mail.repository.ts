import { Injectable } from '@nestjs/common'
import { sql, type Selectable } from 'kysely'
import type { Executor, Trx } from '../database/executor.js'
import type { MailMessages } from '../database/types.gen.js'

export type MailRow = Selectable<MailMessages>

/** longer than the SMTP time limits together: a claim this old belongs to a process that died */
const LEASE = sql`interval '90 seconds'`

@Injectable()
export class MailRepository {
  /** @returns the new message's id, or undefined when one with this key is there already */
  async insert(
    trx: Trx,
    row: {
      key: string
      messageId: string
      recipient: string
      subject: string
      bodyText: string
      bodyHtml: string | null
      attachments: string
      aboutKind: string | null
      aboutId: string | null
      clientId: string | null
      state: 'waiting' | 'sent'
      sentAt: Date | null
    },
  ): Promise<string | undefined> {
    const inserted = await trx
      .insertInto('mailMessages')
      .values(row)
      .onConflict((conflict) => conflict.column('key').doNothing())
      .returning('id')
      .executeTakeFirst()
    return inserted?.id
  }

  /** Takes the message for this process, if it is due and nobody alive has it. */
  async claim(trx: Trx, id: string): Promise<MailRow | undefined> {
    return trx
      .updateTable('mailMessages')
      .set((eb) => ({ state: 'sending', claimedAt: sql<Date>`now()`, attempts: eb('attempts', '+', 1) }))
      .where('id', '=', id)
      .where(({ or, and, eb }) =>
        or([
          and([eb('state', '=', 'waiting'), eb('nextAttemptAt', '<=', sql<Date>`now()`)]),
          and([eb('state', '=', 'sending'), eb('claimedAt', '<', sql<Date>`now() - ${LEASE}`)]),
        ]),
      )
      .returningAll()
      .executeTakeFirst()
  }

  async markSent(trx: Trx, row: MailRow): Promise<void> {
    await this.claimed(trx, row)
      .set({ state: 'sent', sentAt: sql<Date>`now()`, lastError: null })
      .execute()
  }

  async markWaiting(trx: Trx, row: MailRow, again: { afterSeconds: number; error: string }): Promise<void> {
    await this.claimed(trx, row)
      .set({
        state: 'waiting',
        lastError: again.error,
        claimedAt: null,
        nextAttemptAt: sql<Date>`now() + make_interval(secs => ${again.afterSeconds})`,
      })
      .execute()
  }

  async markFailed(trx: Trx, row: MailRow, error: string): Promise<void> {
    await this.claimed(trx, row)
      .set({ state: 'failed', lastError: error, failedAt: sql<Date>`now()` })
      .execute()
  }

  /** Puts a failed or waiting message first in line again. */
  async retry(trx: Trx, id: string): Promise<MailRow | undefined> {
    return trx
      .updateTable('mailMessages')
      .set({
        state: 'waiting',
        attempts: 0,
        nextAttemptAt: sql<Date>`now()`,
        claimedAt: null,
        failedAt: null,
      })
      .where('id', '=', id)
      .where('state', 'in', ['failed', 'waiting'])
      .returningAll()
      .executeTakeFirst()
  }

  /** What should have left by now. */
  async listDue(db: Executor, limit: number): Promise<string[]> {
    const rows = await db
      .selectFrom('mailMessages')
      .select('id')
      .where(({ or, and, eb }) =>
        or([
          and([eb('state', '=', 'waiting'), eb('nextAttemptAt', '<=', sql<Date>`now()`)]),
          and([eb('state', '=', 'sending'), eb('claimedAt', '<', sql<Date>`now() - ${LEASE}`)]),
        ]),
      )
      .orderBy('nextAttemptAt')
      .limit(limit)
      .execute()
    return rows.map(({ id }) => id)
  }

  /** Only the process whose claim still stands may settle it. */
  private claimed(trx: Trx, row: MailRow) {
    return trx
      .updateTable('mailMessages')
      .where('id', '=', row.id)
      .where('state', '=', 'sending')
      .where('attempts', '=', row.attempts)
  }
}
