import { CamelCasePlugin, CompiledQuery, Kysely, PostgresDialect, type Transaction } from 'kysely'
import type pg from 'pg'
import type { DB } from './types.gen.js'

/** Either the reading handle or a transaction: the first parameter of every repository method that reads. */
export type Executor = Kysely<DB>
/** The first parameter of every repository method that locks or writes. */
export type Trx = Transaction<DB>
export type { DB } from './types.gen.js'

/** `pinnedAt`: for the loader of the demonstration's past, whose reads outside a transaction must see that time as well. */
export function kyselyOn(pool: pg.Pool, pinnedAt?: () => Date | undefined): Kysely<DB> {
  return new Kysely<DB>({
    dialect: new PostgresDialect({
      pool,
      ...(pinnedAt && {
        onReserveConnection: async (connection) => {
          const at = pinnedAt()?.toISOString() ?? ''
          await connection.executeQuery(
            CompiledQuery.raw(`select set_config('weirlight.now', $1, false)`, [at]),
          )
        },
      }),
    }),
    // columns are snake_case in SQL and camelCase in code; keys inside jsonb stay as written
    plugins: [new CamelCasePlugin({ maintainNestedObjectKeys: true })],
  })
}
