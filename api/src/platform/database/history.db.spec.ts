import { sql } from 'kysely'
import { describe, expect, it } from 'vitest'
import { aClient, aUser } from '../../testing/people.js'
import { useTestDatabase } from '../../testing/test-database.js'
import { withRequestContext } from '../http/request-context.js'
import { SYSTEM } from './acting.js'

const database = useTestDatabase()

describe('history', () => {
  it('writes who, what from, what to and why, without the code that changes a row knowing', async () => {
    const { db } = database()
    const client = await aClient(db)
    const actor = await aUser(db, { role: 'qa-manager', name: 'Ida Holm' })
    await withRequestContext({ requestId: 'r-1' }, () =>
      db.transaction(actor, 'client.rename', 'merged with its neighbour', (trx) =>
        trx.updateTable('clients').set({ name: 'Joint Works' }).where('id', '=', client.id).execute(),
      ),
    )
    const row = await db.read
      .selectFrom('history')
      .selectAll()
      .where('thing', '=', 'clients')
      .where('action', '=', 'client.rename')
      .executeTakeFirstOrThrow()
    expect(row).toMatchObject({
      actorId: actor.userId,
      actorName: 'Ida Holm',
      actorRole: 'qa-manager',
      reason: 'merged with its neighbour',
      requestId: 'r-1',
      thingId: client.id,
      clientId: client.id,
      operation: 'update',
      old: { name: client.name },
      new: { name: 'Joint Works' },
    })
  })

  it('refuses a change without an actor', async () => {
    const { db } = database()
    await expect(
      db.fresh.insertInto('clients').values({ code: 'X', name: 'X', programmeId: '1' }).execute(),
    ).rejects.toMatchObject({ code: 'WL001' })
    await expect(
      db.transaction({ ...SYSTEM, name: ' ' }, 'client.create', null, () => Promise.resolve()),
    ).rejects.toThrow('needs an actor')
  })

  it('does not keep the actor of one transaction for the next on the same connection', async () => {
    const { db } = database()
    await aClient(db)
    const work = Array.from({ length: 20 }, () =>
      db.unwatched((trx) => trx.updateTable('clients').set({ name: 'Nobody did this' }).execute()),
    )
    for (const result of await Promise.allSettled(work)) expect(result.status).toBe('rejected')
  })

  it('cannot be changed, deleted, emptied, written to or switched off by the application’s role', async () => {
    const { db } = database()
    await aClient(db)
    const tries = [
      sql`update history set reason = 'other'`,
      sql`delete from history`,
      sql`truncate history`,
      sql`insert into history (at, actor_name, actor_role, action, thing, operation) values (now(), 'x', 'x', 'x', 'x', 'insert')`,
      sql`alter table history disable trigger all`,
      sql`drop table history`,
      sql`alter table clients disable trigger z_history`,
      sql`set session_replication_role = replica`,
      sql`update history_default set reason = 'other'`,
      sql`insert into history_seals (number, sealed_at, first_id, last_id, entries, root, previous_head, head)
          select 1, now(), 1, 1, 1, r, r, r from (select sha256('') as r) s; delete from history_seals`,
    ]
    for (const statement of tries)
      await expect(statement.execute(db.fresh), statement.compile(db.fresh).sql).rejects.toThrow()
    // a table of its own with the trigger of history on it would forge entries
    await expect(
      db.unwatched(async (trx) => {
        await sql`create temporary table samples (id bigint)`.execute(trx)
        await sql`create trigger forged after insert on samples for each row execute function write_history('id')`.execute(
          trx,
        )
      }),
    ).rejects.toMatchObject({ code: '42501' })
  })

  it('cannot be changed even by the owner while its triggers stand', async () => {
    const { db, owner } = database()
    await aClient(db)
    await expect(sql`update history set reason = 'other'`.execute(owner.fresh)).rejects.toMatchObject({
      code: 'WL002',
    })
    await expect(sql`delete from history`.execute(owner.fresh)).rejects.toMatchObject({ code: 'WL002' })
    await expect(sql`truncate history`.execute(owner.fresh)).rejects.toMatchObject({ code: 'WL002' })
  })

  it('keeps no secret and no whole file', async () => {
    const { db } = database()
    const user = await aUser(db)
    await db.transaction(SYSTEM, 'user.set-passphrase', null, (trx) =>
      trx
        .updateTable('users')
        .set({ passwordHash: '$argon2id$constructed' })
        .where('id', '=', user.userId)
        .execute(),
    )
    const row = await db.read
      .selectFrom('history')
      .select('new')
      .where('action', '=', 'user.set-passphrase')
      .executeTakeFirstOrThrow()
    expect(row.new).toEqual({ password_hash: '(hidden)' })
  })

  it('writes nothing when nothing changed', async () => {
    const { db } = database()
    const client = await aClient(db)
    await db.transaction(SYSTEM, 'client.touch', null, (trx) =>
      trx.updateTable('clients').set({ name: client.name }).where('id', '=', client.id).execute(),
    )
    const rows = await db.read
      .selectFrom('history')
      .select('id')
      .where('action', '=', 'client.touch')
      .execute()
    expect(rows).toEqual([])
  })
})

describe('the clock of the database', () => {
  it('is the server’s for the application’s role, whatever it asks for', async () => {
    const { db, clock } = database()
    clock.pin('2020-02-03T04:05:06Z')
    try {
      await aClient(db)
    } finally {
      clock.unpin()
    }
    const { rows } = await sql<{
      old: boolean
    }>`select exists (select from history where at < '2021-01-01') as old`.execute(db.read)
    expect(rows).toEqual([{ old: false }])
  })

  it('can be set by the owner’s role alone, and its entries fall into the partition of their month', async () => {
    const { owner, clock } = database()
    clock.pin('2025-08-15T10:00:00Z')
    try {
      await aClient(owner)
    } finally {
      clock.unpin()
    }
    const inDefault = await sql`select 1 from history_default`.execute(owner.read)
    expect(inDefault.rows.length).toBeGreaterThan(0)
    await sql`select history_make_partitions('2025-08-01', '2025-08-01')`.execute(owner.fresh)
    const moved = await sql<{ at: Date }>`select at from history_y2025m08`.execute(owner.read)
    expect(moved.rows.map(({ at }) => at.toISOString())).toContain('2025-08-15T10:00:00.000Z')
    expect((await sql`select 1 from history_default`.execute(owner.read)).rows).toEqual([])
    await expect(sql`delete from history where at < '2026-01-01'`.execute(owner.fresh)).rejects.toMatchObject(
      { code: 'WL002' },
    )
  })
})
