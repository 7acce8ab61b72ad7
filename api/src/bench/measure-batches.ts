import { getBatch, saveReadings, type BatchView, type BodyInput } from '@weirlight/shared/contracts'
import type pg from 'pg'
import type { Agent } from '../testing/agent.js'
import { loadByHand, loadByHttp } from './load.js'
import type { Measured } from './measured.js'
import { replay, type SqlLog, type Statement } from './sql-log.js'

const AT_A_TIME = 4
const OPENINGS = 400
/** corrections of one batch: more would measure a batch that nobody has */
const TURNS = 10

export const BATCHES_NEEDED = 1 + 2 * 20

interface Parts {
  url: string
  headers: Record<string, string>
  agent: Agent
  log: SqlLog
  pool: pg.Pool
}

type Save = BodyInput<typeof saveReadings>
/** what counts in each cell */
type Cells = BatchView['rows']

export async function measureBatches(parts: Parts, batches: readonly BatchView[]): Promise<Measured[]> {
  const [toOpen, ...others] = batches
  if (!toOpen) throw new Error('No batch to open.')
  return [...(await measureOpening(parts, toOpen)), ...(await measureSaving(parts, others))]
}

async function measureOpening(
  { url, headers, agent, log, pool }: Parts,
  batch: BatchView,
): Promise<Measured[]> {
  const params = { id: batch.id }
  await agent.call(saveReadings, { params, body: nextSave(batch.rows, 0) })
  await agent.call(getBatch, { params })
  const { statements } = await log.record(() => agent.call(getBatch, { params }))
  const facts = { atATime: AT_A_TIME, requests: OPENINGS, statements: statements.length }
  const open = { url, next: () => ({ method: 'GET' as const, path: `/api/batches/${batch.id}`, headers }) }
  await loadByHttp({ ...facts, ...open, name: 'warm-up', requests: 40 })
  const byHttp = await loadByHttp({ ...facts, ...open, name: 'Opening a batch of 40 positions' })
  const bare = await onConnections(pool, (clients) =>
    loadByHand({
      ...facts,
      name: 'the same SQL alone',
      work: async (lane) => replay(clientOf(clients, lane), statements),
    }),
  )
  return [byHttp, bare]
}

async function measureSaving(parts: Parts, batches: readonly BatchView[]): Promise<Measured[]> {
  const { url, headers, agent, log, pool } = parts
  const first = []
  for (const batch of batches) {
    const body = nextSave(batch.rows, 0)
    const { answer, statements } = await log.record(() =>
      agent.call(saveReadings, { params: { id: batch.id }, body }),
    )
    first.push({ id: batch.id, cells: answer.rows, statements })
  }
  const ofHttp = first.filter((_, index) => index % 2 === 0)
  const ofHand = first.filter((_, index) => index % 2 === 1)
  const turns = new Map<number, number>()
  const batchOf = <T>(list: readonly T[], lane: number, turn: number): T => {
    const own = list.filter((_, index) => index % AT_A_TIME === lane)
    const found = own[turn % own.length]
    if (found === undefined) throw new Error('Too few batches.')
    return found
  }
  const facts = {
    atATime: AT_A_TIME,
    requests: ofHttp.length * TURNS,
    statements: first[0]?.statements.length ?? 0,
  }
  const byHttp = await loadByHttp({
    ...facts,
    name: 'Saving 40 readings',
    url,
    next: (connection) => {
      const turn = turns.get(connection) ?? 0
      const batch = batchOf(ofHttp, connection, turn)
      return {
        method: 'POST',
        path: `/api/batches/${batch.id}/readings`,
        headers: { ...headers, 'content-type': 'application/json' },
        body: JSON.stringify(nextSave(batch.cells, turn + 1)),
      }
    },
    onAnswer: (connection, body) => {
      const turn = turns.get(connection) ?? 0
      batchOf(ofHttp, connection, turn).cells = (JSON.parse(body) as BatchView).rows
      turns.set(connection, turn + 1)
    },
  })
  const bare = await onConnections(pool, (clients) =>
    loadByHand({
      ...facts,
      name: 'the same SQL alone',
      work: async (lane, turn) => {
        const { statements } = batchOf(ofHand, lane, turn)
        await replay(clientOf(clients, lane), statements, correctAgain(statements, turn + 1))
      },
    }),
  )
  return [byHttp, bare]
}

const absorbance = (position: number, turn: number) => (0.1 + position / 1000 + turn / 10_000).toFixed(4)
const reason = (turn: number) => `Read again for the bench, turn ${turn}`

/** Every cell anew; where something stands in it, superseding that with a reason. */
function nextSave(cells: Cells, turn: number): Save {
  return {
    source: 'typed',
    readings: cells.map(({ id, position, readings }) => {
      const before = readings[0]
      return {
        positionId: id,
        replicate: 1,
        absorbance: absorbance(position, turn),
        supersedes: before?.id ?? null,
        ...(before ? { reason: reason(turn) } : {}),
      }
    }),
  }
}

interface HeardReading {
  positionId: string
  absorbance: string
  supersedesId: string | null
  reason: string | null
}

/** The statements of a save again, with readings that supersede those which are there now. */
function correctAgain(statements: readonly Statement[], turn: number) {
  const reading = statements.find(({ text }) => /from position_readings r join users/.test(text))
  const writing = statements.find(({ text }) => /insert into position_readings/.test(text))
  if (!reading || !writing) throw new Error('The bench does not recognise the statements that save readings.')
  return (statement: Statement, seen: ReadonlyMap<Statement, Record<string, unknown>[]>) => {
    if (statement !== writing) return statement.values
    const rows = seen.get(reading) ?? []
    const superseded = new Set(rows.map((row) => row['supersedes_id']))
    const counting = rows.filter((row) => !superseded.has(row['id']))
    const current = new Map(counting.map((row) => [String(row['position_id']), String(row['id'])]))
    return statement.values.map((value) => {
      if (typeof value !== 'string' || !value.startsWith('[')) return value
      const entries = JSON.parse(value) as HeardReading[]
      const next = entries.map((entry, index) => ({
        ...entry,
        absorbance: absorbance(index, turn),
        supersedesId: current.get(entry.positionId) ?? null,
        reason: reason(turn),
      }))
      return JSON.stringify(next)
    })
  }
}

/** As many connections as there are lanes, each its own from beginning to end. */
export async function onConnections<T>(
  pool: pg.Pool,
  work: (clients: readonly pg.PoolClient[]) => Promise<T>,
): Promise<T> {
  const clients = await Promise.all(Array.from({ length: AT_A_TIME }, () => pool.connect()))
  try {
    return await work(clients)
  } finally {
    for (const client of clients) client.release()
  }
}

export function clientOf(clients: readonly pg.PoolClient[], lane: number): pg.PoolClient {
  const client = clients[lane]
  if (!client) throw new Error('Too few connections.')
  return client
}
