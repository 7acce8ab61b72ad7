import { Injectable } from '@nestjs/common'
import type { Role } from '@weirlight/shared/permissions'
import { sql } from 'kysely'
import type { Executor, Trx } from '../../platform/index.js'

export type UserStatus = 'invited' | 'active' | 'disabled'

export interface UserRow {
  id: string
  email: string
  name: string
  role: Role
  clientId: string | null
  clientName: string | null
  status: UserStatus
  createdAt: Date
  lastSignedInAt: Date | null
  secondFactorSince: Date | null
  version: number
}

export interface Credentials {
  id: string
  name: string
  role: Role
  clientId: string | null
  status: UserStatus
  passwordHash: string | null
  hasSecondFactor: boolean
}

const columns = sql`u.id, u.email, u.name, u.role, u.client_id, c.name as client_name, u.status, u.created_at,
  u.last_signed_in_at, u.second_factor_since, u.version`
const source = sql`users u left join clients c on c.id = u.client_id`

@Injectable()
export class UsersRepository {
  async list(db: Executor): Promise<UserRow[]> {
    const { rows } =
      await sql<UserRow>`select ${columns} from ${source} order by lower(u.name), u.id`.execute(db)
    return rows
  }

  async find(db: Executor, id: string): Promise<UserRow | undefined> {
    const { rows } = await sql<UserRow>`select ${columns} from ${source} where u.id = ${id}`.execute(db)
    return rows[0]
  }

  async lock(trx: Trx, id: string): Promise<UserRow | undefined> {
    const { rows } =
      await sql<UserRow>`select ${columns} from ${source} where u.id = ${id} for no key update of u`.execute(
        trx,
      )
    return rows[0]
  }

  /** Locks them in one order, so that two administrators cannot remove each other at the same moment. */
  async lockActiveAdministrators(trx: Trx): Promise<string[]> {
    const { rows } = await sql<{ id: string }>`select id from users
      where role = 'administrator' and status = 'active' order by id for no key update`.execute(trx)
    return rows.map(({ id }) => id)
  }

  async findCredentials(db: Executor, email: string): Promise<Credentials | undefined> {
    const { rows } = await sql<Credentials>`
      select id, name, role, client_id, status, password_hash, second_factor_since is not null as has_second_factor
      from users where email = ${email}`.execute(db)
    return rows[0]
  }

  async findPassphraseHash(db: Executor, id: string): Promise<string | null> {
    const { rows } = await sql<{ passwordHash: string | null }>`
      select password_hash from users where id = ${id} and status = 'active'`.execute(db)
    return rows[0]?.passwordHash ?? null
  }

  async insert(
    trx: Trx,
    row: { email: string; name: string; role: Role; clientId: string | null },
  ): Promise<string> {
    const { rows } = await sql<{ id: string }>`insert into users (email, name, role, client_id, created_at)
      values (${row.email}, ${row.name}, ${row.role}, ${row.clientId}, weirlight_now()) returning id`.execute(
      trx,
    )
    return rows[0]?.id ?? ''
  }

  async update(
    trx: Trx,
    id: string,
    row: { name: string; role: Role; clientId: string | null },
  ): Promise<void> {
    await sql`update users set name = ${row.name}, role = ${row.role}, client_id = ${row.clientId},
      version = version + 1 where id = ${id}`.execute(trx)
  }

  async updateStatus(trx: Trx, id: string, status: UserStatus): Promise<void> {
    await sql`update users set status = ${status}, version = version + 1 where id = ${id}`.execute(trx)
  }

  async hasClient(db: Executor, clientId: string): Promise<boolean> {
    const { rows } = await sql`select 1 from clients where id = ${clientId} and active`.execute(db)
    return rows.length > 0
  }

  async hasPassphrase(db: Executor, id: string): Promise<boolean> {
    const { rows } = await sql<{ has: boolean }>`
      select password_hash is not null as has from users where id = ${id}`.execute(db)
    return rows[0]?.has ?? false
  }

  async updatePassphrase(trx: Trx, id: string, passwordHash: string): Promise<void> {
    await sql`update users set password_hash = ${passwordHash}, version = version + 1 where id = ${id}`.execute(
      trx,
    )
  }

  async activate(trx: Trx, id: string, row: { name: string; passwordHash: string }): Promise<void> {
    await sql`update users set name = ${row.name}, password_hash = ${row.passwordHash}, status = 'active',
      version = version + 1 where id = ${id}`.execute(trx)
  }

  async updateSecondFactor(trx: Trx, id: string, { isOn }: { isOn: boolean }): Promise<void> {
    await sql`update users set second_factor_since = case when ${isOn}::boolean then weirlight_now() end,
      version = version + 1 where id = ${id}`.execute(trx)
  }

  /** The version stays: signing in is no change that a form must know of. */
  async markSignedIn(trx: Trx, id: string): Promise<void> {
    await sql`update users set last_signed_in_at = weirlight_now() where id = ${id}`.execute(trx)
  }
}
