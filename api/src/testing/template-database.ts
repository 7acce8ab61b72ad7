import { createHash } from 'node:crypto'
import pg from 'pg'
import type { TestProject } from 'vitest/node'
import { migrate, readMigrations } from '../platform/database/migrator.js'
import { readTestUrls, roleOf, withDatabase, type TestUrls } from './test-urls.js'

export interface ProvidedDatabase {
  urls: TestUrls
  template: string
}

declare module 'vitest' {
  interface ProvidedContext {
    database: ProvidedDatabase
  }
}

/** Before the first database test: one migrated template, which every test file clones. */
export default async function setup(project: TestProject): Promise<void> {
  const urls = readTestUrls()
  project.provide('database', { urls, template: await makeTemplate(urls) })
}

/** Named after its migrations: made once, used until they change, by any number of runs at a time. */
export async function makeTemplate(urls: TestUrls): Promise<string> {
  const hash = createHash('sha256')
  for (const { name, sha256 } of readMigrations()) hash.update(name).update(sha256)
  const name = `weirlight_template_${hash.digest('hex').slice(0, 12)}`
  const admin = new pg.Client({ connectionString: urls.admin })
  await admin.connect()
  try {
    await admin.query("select pg_advisory_lock(hashtext('weirlight.test.template'))")
    for (const url of [urls.owner, urls.app]) await makeRole(admin, roleOf(url))
    const { rows } = await admin.query('select datistemplate from pg_database where datname = $1', [name])
    if (rows.length === 1) return name
    await fill(admin, { name, urls })
    return name
  } finally {
    await admin.end()
  }
}

async function fill(admin: pg.Client, { name, urls }: { name: string; urls: TestUrls }): Promise<void> {
  // whole only when it bears its name: a run that was broken off leaves another one
  const draft = `${name}_draft`
  await admin.query(`drop database if exists ${draft} with (force)`)
  await admin.query(`create database ${draft} owner ${pg.escapeIdentifier(roleOf(urls.owner))}`)
  await migrate({ ownerUrl: withDatabase(urls.owner, draft), appRole: roleOf(urls.app) })
  await admin.query(`alter database ${draft} rename to ${name}`)
}

async function makeRole(admin: pg.Client, role: string): Promise<void> {
  const { rowCount } = await admin.query('select 1 from pg_roles where rolname = $1', [role])
  if (rowCount === 0) await admin.query(`create role ${pg.escapeIdentifier(role)} login`)
}
