import { randomBytes } from 'node:crypto'
import pg from 'pg'
import { afterAll, beforeAll, inject } from 'vitest'
import { Clock } from '../platform/clock/clock.js'
import { Database } from '../platform/database/database.js'
import { openPool } from '../platform/database/pool.js'
import { roleOf, withDatabase } from './test-urls.js'

/** A database of this test file's own, as the application's role sees it and as the owner does. */
export interface TestDatabase {
  name: string
  appUrl: string
  ownerUrl: string
  /** what services get: the application's role */
  db: Database
  /** the owner's role: to look behind, to pin the clock, to show what even the owner cannot do */
  owner: Database
  clock: Clock
  drop(): Promise<void>
}

export async function cloneDatabase(): Promise<TestDatabase> {
  const { urls, template } = inject('database')
  const name = `weirlight_test_${process.pid}_${randomBytes(4).toString('hex')}`
  const admin = new pg.Client({ connectionString: urls.admin })
  await admin.connect()
  try {
    await admin.query(
      `create database ${name} template ${template} strategy file_copy owner ${pg.escapeIdentifier(roleOf(urls.owner))}`,
    )
  } finally {
    await admin.end()
  }
  const clock = new Clock()
  const appUrl = withDatabase(urls.app, name)
  const ownerUrl = withDatabase(urls.owner, name)
  const db = new Database({ pool: openPool({ url: appUrl, size: 10, name: 'test' }), clock })
  const owner = new Database({ pool: openPool({ url: ownerUrl, size: 3, name: 'test-owner' }), clock })
  return {
    name,
    appUrl,
    ownerUrl,
    db,
    owner,
    clock,
    drop: async () => {
      await Promise.all([db.onApplicationShutdown(), owner.onApplicationShutdown()])
      const client = new pg.Client({ connectionString: urls.admin })
      await client.connect()
      await client.query(`drop database if exists ${name} with (force)`)
      await client.end()
    },
  }
}

/** `const database = useTestDatabase()` at the top of a test file; `database().db` inside tests. */
export function useTestDatabase(): () => TestDatabase {
  let database: TestDatabase | undefined
  beforeAll(async () => {
    database = await cloneDatabase()
  })
  afterAll(async () => {
    await database?.drop()
  })
  return () => {
    if (!database) throw new Error('The test database is there inside tests and hooks.')
    return database
  }
}
