import { ProblemError } from '../http/problem.js'
import type { DB, Trx } from './executor.js'

/**
 * After locking a row: refuses a form that was filled in from an older one, and says who changed it when.
 * `await assertVersion(trx, { thing: 'samples', id, has: row.version, sent: input.version })`
 */
export async function assertVersion(
  trx: Trx,
  { thing, id, has, sent }: { thing: keyof DB; id: string; has: number; sent: number },
): Promise<void> {
  if (has === sent) return
  const last = await trx
    .selectFrom('history')
    .select(['actorName', 'at'])
    .where('thing', '=', snakeCase(thing))
    .where('thingId', '=', id)
    .orderBy('at', 'desc')
    .orderBy('id', 'desc')
    .limit(1)
    .executeTakeFirst()
  const who = last?.actorName ?? 'Somebody else'
  throw new ProblemError(
    'stale',
    `${who} changed this after you opened it. Your entries are still on the page.`,
    {
      ...(last ? { conflict: { changedBy: last.actorName, changedAt: last.at.toISOString() } } : {}),
    },
  )
}

function snakeCase(name: string): string {
  return name.replaceAll(/[A-Z]/g, (letter) => `_${letter.toLowerCase()}`)
}
