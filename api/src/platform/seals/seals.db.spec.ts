import { createHash } from 'node:crypto'
import { sql } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import { aClient } from '../../testing/people.js'
import { useTestDatabase } from '../../testing/test-database.js'
import { SYSTEM } from '../database/acting.js'
import { SealsRepository } from './seals.repository.js'
import { SealsService } from './seals.service.js'

const database = useTestDatabase()
const service = () => new SealsService(database().db, new SealsRepository(), database().clock)

async function tamper(statement: string): Promise<void> {
  // only somebody with the owner's role and intent can do this
  await database().owner.unwatched(async (trx) => {
    await sql.raw('alter table history disable trigger user').execute(trx)
    await sql.raw(statement).execute(trx)
    await sql.raw('alter table history enable trigger user').execute(trx)
  })
}

describe('seals', () => {
  beforeEach(async () => {
    await aClient(database().db)
    await service().seal()
    await aClient(database().db)
    await service().seal()
  })

  it('covers every entry once, chains the heads, and can be recomputed from the table alone', async () => {
    const { owner } = database()
    const seals = await owner.read.selectFrom('historySeals').selectAll().orderBy('number').execute()
    const { rows: entries } = await sql<{ id: string; leaf: string }>`
      select id, history_leaf(h) as leaf from history h order by id`.execute(owner.read)
    expect(seals.reduce((sum, seal) => sum + Number(seal.entries), 0)).toBe(entries.length)

    // an implementation of its own, from the text of RFC 9162 and the chain's definition
    const sha = (...parts: Buffer[]) => createHash('sha256').update(Buffer.concat(parts)).digest()
    const root = (leaves: string[]): Buffer => {
      if (leaves.length === 1) return sha(Buffer.of(0), Buffer.from(leaves[0] ?? ''))
      const k = 2 ** Math.ceil(Math.log2(leaves.length) - 1)
      return sha(Buffer.of(1), root(leaves.slice(0, k)), root(leaves.slice(k)))
    }
    const eight = (text: string) => {
      const bytes = Buffer.alloc(8)
      bytes.writeBigUInt64BE(BigInt(text))
      return bytes
    }
    let head = Buffer.alloc(32)
    for (const seal of seals) {
      const own = entries.filter(
        ({ id }) => BigInt(id) >= BigInt(seal.firstId) && BigInt(id) <= BigInt(seal.lastId),
      )
      expect(String(own.length)).toBe(seal.entries)
      expect(seal.root.toString('hex')).toBe(root(own.map(({ leaf }) => leaf)).toString('hex'))
      expect(seal.previousHead.toString('hex')).toBe(head.toString('hex'))
      head = sha(
        Buffer.of(2),
        head,
        eight(seal.number),
        eight(seal.firstId),
        eight(seal.lastId),
        eight(seal.entries),
        seal.root,
      )
      expect(seal.head.toString('hex')).toBe(head.toString('hex'))
    }
    expect(await service().check(100)).toMatchObject({
      ok: true,
      entries: entries.length,
      head: head.toString('hex'),
    })
  })

  it('seals nothing twice, by any number of processes at a time', async () => {
    await aClient(database().db)
    const counts = await Promise.all([service().seal(), service().seal(), service().seal()])
    expect(counts.filter((count) => count > 0)).toHaveLength(1)
    expect(await service().check(1000)).toMatchObject({ ok: true })
  })

  it('waits for a writer that has an earlier place but commits later', async () => {
    const { db } = database()
    let release: () => void = () => undefined
    const held = new Promise<void>((resolve) => {
      release = resolve
    })
    let hasWritten: () => void = () => undefined
    const written = new Promise<void>((resolve) => {
      hasWritten = resolve
    })
    const slow = db.transaction(SYSTEM, 'client.rename', null, async (trx) => {
      await trx.updateTable('clients').set({ name: 'Slow writer' }).execute()
      hasWritten()
      await held
    })
    await written
    // somebody else commits a later entry while the earlier one is still open
    await aClient(db)
    const sealing = service().seal()
    await new Promise((resolve) => setTimeout(resolve, 300))
    release()
    await slow
    await sealing
    const unsealed = await sql<{ n: number }>`select count(*)::int as n from history
      where id <= (select max(last_id) from history_seals)`.execute(db.read)
    const sealed = await sql<{ n: number }>`select sum(entries)::int as n from history_seals`.execute(db.read)
    expect(unsealed.rows[0]?.n).toBe(sealed.rows[0]?.n)
    expect(await service().check(1000)).toMatchObject({ ok: true })
  })

  it.each([
    ['a changed reason', `update history set reason = 'other' where id = (select min(id) from history)`],
    [
      'a changed value',
      `update history set new = jsonb_set(new, '{name}', '"x"') where id = (select min(id) from history where thing = 'clients')`,
    ],
    ['a removed entry', `delete from history where id = (select max(last_id) from history_seals)`],
    [
      'a moved time',
      `update history set at = at + interval '1 microsecond' where id = (select min(id) from history)`,
    ],
  ])('finds %s', async (_, statement) => {
    await keepCopy()
    expect(await service().check(1000)).toMatchObject({ ok: true })
    await tamper(statement)
    const found = await service().check(1000)
    expect(found.ok).toBe(false)
    expect(found.brokenAt).not.toBeNull()
    await tamper(RESTORE)
    expect(await service().check(1000)).toMatchObject({ ok: true })
  })

  it.each([-5, 'free'])('finds an entry slipped in at id %s', async (place) => {
    await keepCopy()
    // an id that no entry took: a transaction that was undone leaves one
    await expect(
      database().db.transaction(SYSTEM, 'client.create', null, async (trx) => {
        await trx.updateTable('clients').set({ name: 'Undone' }).execute()
        throw new Error('undone')
      }),
    ).rejects.toThrow('undone')
    await aClient(database().db)
    await service().seal()
    expect(await service().check(1000)).toMatchObject({ ok: true })
    await keepCopy()
    const id = place === -5 ? '-5' : '(select max(id) - 3 from history)'
    await tamper(`insert into history (id, at, actor_name, actor_role, action, thing, operation)
      overriding system value values (${id}, now(), 'x', 'x', 'a.b', 'clients', 'insert')`)
    expect(await service().check(1000)).toMatchObject({ ok: false })
    await tamper(RESTORE)
    expect(await service().check(1000)).toMatchObject({ ok: true })
  })

  it.each(['entries = entries + 1', 'first_id = first_id + 1', `root = sha256('x')`, `head = sha256('x')`])(
    'finds a seal with %s',
    async (change) => {
      const changeSeals = async (set: string) =>
        database().owner.unwatched(async (trx) => {
          await sql.raw('alter table history_seals disable trigger user').execute(trx)
          await sql.raw(set).execute(trx)
          await sql.raw('alter table history_seals enable trigger user').execute(trx)
        })
      await changeSeals(
        'drop table if exists seals_copy; create table seals_copy as select * from history_seals',
      )
      await changeSeals(`update history_seals set ${change} where number = 1`)
      expect(await service().check(1000)).toMatchObject({ ok: false, brokenAt: '1' })
      await changeSeals('delete from history_seals; insert into history_seals select * from seals_copy')
      expect(await service().check(1000)).toMatchObject({ ok: true })
    },
  )
})

async function keepCopy(): Promise<void> {
  await database().owner.unwatched(async (trx) => {
    await sql.raw('drop table if exists history_copy').execute(trx)
    await sql.raw('create table history_copy as select * from history').execute(trx)
  })
}

const RESTORE = 'delete from history; insert into history overriding system value select * from history_copy'
