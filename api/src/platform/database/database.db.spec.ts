import { readFileSync } from 'node:fs'
import { sql } from 'kysely'
import { inject } from 'vitest'
import { describe, expect, it } from 'vitest'
import { aClient, aUser } from '../../testing/people.js'
import { testSettings } from '../../testing/test-app.js'
import { useTestDatabase } from '../../testing/test-database.js'
import { roleOf } from '../../testing/test-urls.js'
import { SYSTEM } from './acting.js'
import { TYPES_FILE, generateTypes } from './codegen.js'
import { migrate, readMigrations, MIGRATIONS } from './migrator.js'
import { RoleCheck } from './role-check.js'
import { RoleRepository } from './role.repository.js'
import { assertVersion } from './versions.js'
import { cpSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

const database = useTestDatabase()

describe('the types of the tables', () => {
  it('are those of the migrations (npm run codegen -w api)', () => {
    expect(generateTypes(database().ownerUrl)).toBe(readFileSync(TYPES_FILE, 'utf8'))
  })
})

describe('migrations', () => {
  const run = (folder: string) =>
    migrate({ ownerUrl: database().ownerUrl, appRole: roleOf(inject('database').urls.app), folder })

  it('run once, refuse an edited or missing file, and undo all of a run that fails', async () => {
    const folder = mkdtempSync(join(tmpdir(), 'weirlight-migrations-'))
    try {
      cpSync(MIGRATIONS, folder, { recursive: true })
      expect(await run(folder)).toEqual([])
      writeFileSync(join(folder, '29990101T000000-good.sql'), 'create table made_by_test (id bigint);')
      writeFileSync(join(folder, '29990101T010000-bad.sql'), 'create table half (id bigint); select 1 / 0;')
      await expect(run(folder)).rejects.toThrow('29990101T010000-bad failed: division by zero')
      const tables = await sql`select 1 from pg_class where relname in ('made_by_test', 'half')`.execute(
        database().owner.read,
      )
      expect(tables.rows).toEqual([])
      rmSync(join(folder, '29990101T010000-bad.sql'))
      expect(await run(folder)).toEqual(['29990101T000000-good'])
      writeFileSync(join(folder, '29990101T000000-good.sql'), 'create table made_by_test (id int);')
      await expect(run(folder)).rejects.toThrow('was edited after it had run')
      rmSync(join(folder, '29990101T000000-good.sql'))
      await expect(run(folder)).rejects.toThrow('its file is missing')
    } finally {
      rmSync(folder, { recursive: true, force: true })
    }
  })

  it('refuse an application’s role that could change history', async () => {
    const { ownerUrl } = database()
    await expect(migrate({ ownerUrl, appRole: roleOf(ownerUrl) })).rejects.toThrow('could change history')
    await expect(migrate({ ownerUrl, appRole: 'nobody_here' })).rejects.toThrow('does not exist')
    expect(readMigrations().length).toBeGreaterThan(1)
  })
})

describe('the role of the application', () => {
  const check = (db: ReturnType<typeof database>['db'], isOwnerAllowed = false) =>
    new RoleCheck(db, new RoleRepository(), { isOwnerAllowed }).onApplicationBootstrap()

  it('is refused at the start when it could change history', async () => {
    await expect(check(database().db)).resolves.toBeUndefined()
    await expect(check(database().owner)).rejects.toThrow('can change history')
    await expect(check(database().owner, true)).resolves.toBeUndefined()
  })

  it('has no right to delete where the record is kept for good', async () => {
    const { rows } = await sql<{ relname: string }>`
      select c.relname from pg_class c join pg_trigger t on t.tgrelid = c.oid
      where t.tgname = 'b_forbid_change' and has_table_privilege(c.oid, 'delete')`.execute(database().db.read)
    expect(rows).toEqual([])
  })
})

describe('a stale form', () => {
  it('is refused with who changed the row and when', async () => {
    const { db } = database()
    const client = await aClient(db)
    const qa = await aUser(db, { role: 'qa-manager', name: 'Ida Holm' })
    await db.transaction(qa, 'client.rename', null, (trx) =>
      trx.updateTable('clients').set({ name: 'New', version: 2 }).where('id', '=', client.id).execute(),
    )
    const tried = db.transaction(SYSTEM, 'client.rename', null, (trx) =>
      assertVersion(trx, { thing: 'clients', id: client.id, has: 2, sent: 1 }),
    )
    await expect(tried).rejects.toMatchObject({ code: 'stale', conflict: { changedBy: 'Ida Holm' } })
  })
})

describe('settings', () => {
  it('of a test are those of the application’s role', () => {
    expect(roleOf(testSettings(database().appUrl).databaseUrl)).not.toBe(roleOf(database().ownerUrl))
  })
})
