import { Injectable } from '@nestjs/common'
import type { Role } from '@weirlight/shared/permissions'
import { sql } from 'kysely'
import type { Executor, Trx } from '../../platform/index.js'
import type { UserStatus } from './users.repository.js'

export type TokenKind = 'invitation' | 'reset'

export interface TokenRow {
  id: string
  userId: string
  expiresAt: Date
  isLive: boolean
  name: string
  email: string
  role: Role
  clientId: string | null
  clientName: string | null
  status: UserStatus
}

const columns = sql`t.id, t.user_id, t.expires_at, t.used_at is null and t.expires_at > weirlight_now() as is_live,
  u.name, u.email, u.role, u.client_id, c.name as client_name, u.status`
const source = sql`user_tokens t join users u on u.id = t.user_id left join clients c on c.id = u.client_id`

/** Links that were sent: only their hash is kept. */
@Injectable()
export class TokensRepository {
  async insert(
    trx: Trx,
    row: { userId: string; kind: TokenKind; tokenHash: string; hours: number },
  ): Promise<{ id: string; expiresAt: Date }> {
    const { rows } = await sql<{ id: string; expiresAt: Date }>`
      insert into user_tokens (user_id, kind, token_hash, expires_at)
      values (${row.userId}, ${row.kind}, ${row.tokenHash}, weirlight_now() + make_interval(hours => ${row.hours}))
      returning id, expires_at`.execute(trx)
    const [inserted] = rows
    if (!inserted) throw new Error('The link was not written.')
    return inserted
  }

  async find(db: Executor, kind: TokenKind, tokenHash: string): Promise<TokenRow | undefined> {
    const { rows } = await sql<TokenRow>`select ${columns} from ${source}
      where t.kind = ${kind} and t.token_hash = ${tokenHash}`.execute(db)
    return rows[0]
  }

  /** Locks the person too: of two who use one link at once, the second finds it used. */
  async lock(trx: Trx, kind: TokenKind, tokenHash: string): Promise<TokenRow | undefined> {
    await sql`select t.id from user_tokens t join users u on u.id = t.user_id
      where t.kind = ${kind} and t.token_hash = ${tokenHash} for no key update`.execute(trx)
    return this.find(trx, kind, tokenHash)
  }

  /** Every open link of a person ends: when one is used, when a newer one is sent, when the account is disabled. */
  async endAllOf(trx: Trx, userId: string): Promise<void> {
    await sql`update user_tokens set used_at = weirlight_now() where user_id = ${userId} and used_at is null`.execute(
      trx,
    )
  }

  async countRecent(db: Executor, userId: string, kind: TokenKind): Promise<number> {
    const { rows } = await sql<{ count: number }>`select count(*)::int as count from user_tokens
      where user_id = ${userId} and kind = ${kind} and created_at > weirlight_now() - interval '1 hour'`.execute(
      db,
    )
    return rows[0]?.count ?? 0
  }
}
