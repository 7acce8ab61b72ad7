import { CamelCasePlugin, Kysely, PostgresDialect, type Transaction } from 'kysely'
import type pg from 'pg'
import type { DB } from './types.gen.js'

/** Either the reading handle or a transaction: the first parameter of every repository method that reads. */
export type Executor = Kysely<DB>
/** The first parameter of every repository method that locks or writes. */
export type Trx = Transaction<DB>
export type { DB } from './types.gen.js'

export function kyselyOn(pool: pg.Pool): Kysely<DB> {
  return new Kysely<DB>({
    dialect: new PostgresDialect({ pool }),
    // columns are snake_case in SQL and camelCase in code; keys inside jsonb stay as written
    plugins: [new CamelCasePlugin({ maintainNestedObjectKeys: true })],
  })
}
