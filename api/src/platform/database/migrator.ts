import { createHash } from 'node:crypto'
import { readdirSync, readFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { Kysely, Migrator, PostgresDialect, sql, type Migration } from 'kysely'
import PgBoss from 'pg-boss'
import { JOB_SCHEMA } from './job-schema.js'
import { openPool } from './pool.js'

/** sql/migrations, both from src/platform/database and from dist/platform/database */
export const MIGRATIONS = join(dirname(fileURLToPath(import.meta.url)), '../../../../sql/migrations')

interface MigrationFile {
  name: string
  text: string
  sha256: string
}

export function readMigrations(folder = MIGRATIONS): MigrationFile[] {
  return readdirSync(folder)
    .filter((file) => /^\d{8}T\d{6}-[a-z0-9-]+\.sql$/.test(file))
    .sort()
    .map((file) => {
      const text = readFileSync(join(folder, file), 'utf8')
      return { name: file.slice(0, -4), text, sha256: createHash('sha256').update(text).digest('hex') }
    })
}

export interface MigrateOptions {
  ownerUrl: string
  appRole: string
  folder?: string
}

/** Runs what is new, in order, in one transaction. Refuses a migration that was edited after it had run. */
export async function migrate({ ownerUrl, appRole, folder = MIGRATIONS }: MigrateOptions): Promise<string[]> {
  const files = readMigrations(folder)
  const settings = { 'weirlight.app_role': appRole, client_min_messages: 'warning' }
  const pool = openPool({ url: ownerUrl, size: 2, name: 'weirlight-migrate', settings })
  const db = new Kysely<unknown>({ dialect: new PostgresDialect({ pool }) })
  try {
    await checkRoles(db, appRole)
    await sql`create table if not exists migration_checksums (
      name text primary key, sha256 text not null, run_at timestamptz not null default now())`.execute(db)
    await refuseEdited(db, files)
    const done = await runMigrator(db, files)
    await installJobs(db, ownerUrl, appRole)
    return done
  } finally {
    await db.destroy()
  }
}

async function checkRoles(db: Kysely<unknown>, appRole: string): Promise<void> {
  const { rows } = await sql<{ owner: string; known: boolean; powerful: boolean }>`
    select current_user as owner,
      exists (select from pg_roles where rolname = ${appRole}) as known,
      coalesce((select rolsuper or pg_has_role(rolname, current_user, 'member')
        from pg_roles where rolname = ${appRole}), false) as powerful`.execute(db)
  const row = rows[0]
  if (!row?.known) {
    throw new Error(
      `The application's role “${appRole}” does not exist. Create it first: create role ${appRole} login`,
    )
  }
  if (row.powerful) {
    throw new Error(
      `The application's role “${appRole}” could change history: it is a superuser or may act as the owner “${row.owner}”. Give DATABASE_URL a role of its own.`,
    )
  }
}

async function refuseEdited(db: Kysely<unknown>, files: MigrationFile[]): Promise<void> {
  const { rows } = await sql<{ name: string; sha256: string }>`
    select name, sha256 from migration_checksums order by name`.execute(db)
  for (const row of rows) {
    const file = files.find((candidate) => candidate.name === row.name)
    if (!file) throw new Error(`Migration ${row.name} has run here but its file is missing.`)
    if (file.sha256 !== row.sha256) {
      throw new Error(`Migration ${row.name} was edited after it had run. Write a new migration instead.`)
    }
  }
}

async function runMigrator(db: Kysely<unknown>, files: MigrationFile[]): Promise<string[]> {
  const migrations: Record<string, Migration> = {}
  for (const file of files) {
    migrations[file.name] = {
      up: async (trx) => {
        await sql.raw(file.text).execute(trx)
        await sql`insert into migration_checksums (name, sha256) values (${file.name}, ${file.sha256})`.execute(
          trx,
        )
      },
    }
  }
  const migrator = new Migrator({
    db,
    provider: { getMigrations: () => Promise.resolve(migrations) },
    migrationTableName: 'migrations',
    migrationLockTableName: 'migrations_lock',
  })
  const { error, results } = await migrator.migrateToLatest()
  if (error) {
    const failed = results?.find((result) => result.status === 'Error')?.migrationName
    const message = error instanceof Error ? error.message : String(error)
    throw new Error(`Migration ${failed ?? ''} failed: ${message}`, { cause: error })
  }
  return (results ?? []).filter((result) => result.status === 'Success').map((result) => result.migrationName)
}

/**
 * The queue's tables belong to the owner. The application may use them and declare a queue, through a
 * function that runs with the owner's rights, but not alter them.
 */
async function installJobs(db: Kysely<unknown>, ownerUrl: string, appRole: string): Promise<void> {
  const boss = new PgBoss({
    connectionString: ownerUrl,
    schema: JOB_SCHEMA,
    max: 1,
    supervise: false,
    schedule: false,
    migrate: true,
  })
  boss.on('error', () => undefined)
  await boss.start()
  await boss.stop({ graceful: false, wait: true })
  const schema = sql.id(JOB_SCHEMA)
  const role = sql.id(appRole)
  await sql`grant usage on schema ${schema} to ${role}`.execute(db)
  await sql`grant select, insert, update, delete on all tables in schema ${schema} to ${role}`.execute(db)
  await sql`alter default privileges in schema ${schema} grant select, insert, update, delete on tables to ${role}`.execute(
    db,
  )
  await sql`alter function ${schema}.create_queue(text, json) security definer set search_path = ${schema}, pg_temp`.execute(
    db,
  )
}
