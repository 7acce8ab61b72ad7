import { Injectable } from '@nestjs/common'
import { CompiledQuery, sql } from 'kysely'
import type { Executor, Trx } from '../database/executor.js'
import { JOB_SCHEMA } from '../database/job-schema.js'

@Injectable()
export class JobsRepository {
  /** What the queue needs to write on the caller's transaction. */
  writerOn(trx: Trx): { executeSql: (text: string, values: unknown[]) => Promise<{ rows: unknown[] }> } {
    const plain = trx.withoutPlugins()
    return {
      executeSql: async (text, values) => {
        const { rows } = await plain.executeQuery(CompiledQuery.raw(text, values))
        return { rows }
      },
    }
  }

  /** Heard when the transaction commits, by every process that works on jobs. */
  async ring(trx: Trx, job: string): Promise<void> {
    await sql`select pg_notify('weirlight_jobs', ${job})`.execute(trx)
  }

  /** Whether a job that is due has waited for two minutes. */
  async isAnyLate(db: Executor): Promise<boolean> {
    const { rows } = await sql<{ late: boolean }>`select exists (
      select from ${sql.id(JOB_SCHEMA, 'job')} j
      where state in ('created', 'retry') and start_after < now() - interval '2 minutes'
        and name <> 'dead-letter' and name not like '\\_\\_pgboss%') as late`.execute(db)
    return rows[0]?.late ?? false
  }
}
