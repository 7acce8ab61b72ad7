import { sql } from 'kysely'
import type { Trx } from '../platform/index.js'

/** The months of the past need their partitions before anything is written into them. */
export async function makeHistoryPartitions(
  trx: Trx,
  { from, to }: { from: string; to: string },
): Promise<void> {
  await sql`select history_make_partitions(${from}::date, ${to}::date)`.execute(trx)
}
