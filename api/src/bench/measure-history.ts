import { listHistory } from '@weirlight/shared/contracts'
import type pg from 'pg'
import type { Agent } from '../testing/agent.js'
import { loadByHand, loadByHttp } from './load.js'
import { clientOf, onConnections } from './measure-batches.js'
import type { Measured } from './measured.js'
import { replay, type SqlLog, type Statement } from './sql-log.js'

const AT_A_TIME = 4
const REQUESTS = 400

/** The newest page, one far back, one person's, one table's, one number's, and one day's, in turn. */
export async function measureHistory(parts: {
  url: string
  headers: Record<string, string>
  agent: Agent
  log: SqlLog
  pool: pg.Pool
  entries: number
}): Promise<Measured[]> {
  const { agent, log, pool, headers } = parts
  const { rows } = await pool.query<{ at: string; id: string; actorId: string; number: string; day: string }>(
    `select to_char(at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.US"Z"') as at, id, actor_id as "actorId",
       (select number from samples order by id limit 1) as number, (at at time zone 'UTC')::date::text as day
     from history where actor_id is not null order by history.at desc, history.id desc offset $1 limit 1`,
    [Math.floor(parts.entries / 2)],
  )
  const [far] = rows
  if (!far) throw new Error('The history is empty.')
  const queries = [
    {},
    { after: Buffer.from(JSON.stringify([far.at, far.id])).toString('base64url') },
    { actorId: far.actorId },
    { thing: 'samples' },
    { number: far.number },
    { from: far.day, to: far.day },
  ]
  const logs: Statement[][] = []
  for (const query of queries) {
    await agent.call(listHistory, { query })
    logs.push((await log.record(() => agent.call(listHistory, { query }))).statements)
  }
  const paths = queries.map((query) => `/api/history?${new URLSearchParams(query as Record<string, string>)}`)
  const facts = {
    atATime: AT_A_TIME,
    requests: REQUESTS,
    statements: Math.round(logs.reduce((sum, { length }) => sum + length, 0) / logs.length),
  }
  const turns = new Map<number, number>()
  const list = {
    url: parts.url,
    next: (connection: number) => {
      const turn = turns.get(connection) ?? connection
      turns.set(connection, turn + 1)
      return { method: 'GET' as const, path: paths[turn % paths.length] ?? '', headers }
    },
  }
  await loadByHttp({ ...facts, ...list, name: 'warm-up', requests: 40 })
  const name = `Listing history, ${parts.entries.toLocaleString('en')} entries`
  const byHttp = await loadByHttp({ ...facts, ...list, name })
  const bare = await onConnections(pool, (clients) =>
    loadByHand({
      ...facts,
      name: 'the same SQL alone',
      work: async (lane, turn) => replay(clientOf(clients, lane), logs[(lane + turn) % logs.length] ?? []),
    }),
  )
  return [byHttp, bare]
}
