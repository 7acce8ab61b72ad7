import { Injectable } from '@nestjs/common'
import { sql, type RawBuilder } from 'kysely'
import type { Executor } from '../../platform/index.js'
import type { FamilyMember } from './family.repository.js'

export interface HistoryEntry {
  id: string
  at: Date
  /** with its microseconds, which the key of a page needs */
  atText: string
  actorId: string | null
  actorName: string
  actorRole: string
  action: string
  reason: string | null
  requestId: string | null
  thing: string
  thingId: string | null
  thingNumber: string | null
  operation: 'insert' | 'update' | 'delete'
  old: Record<string, unknown> | null
  new: Record<string, unknown> | null
}

/** What narrows the list; times and families are looked up before, so that the plan knows them. */
export interface HistoryFilter {
  actorId?: string | undefined
  thing?: string | undefined
  thingId?: string | undefined
  action?: string | undefined
  /** from this moment on, and before that one */
  since?: string | undefined
  until?: string | undefined
  /** a number that no table knows any more is looked for as written */
  number?: string | undefined
  family?: readonly FamilyMember[] | undefined
  /** when the family began; spares the months before it */
  familySince?: string | undefined
}

@Injectable()
export class HistoryRepository {
  /** Newest first; `after` is the key of the last entry shown. */
  async list(
    db: Executor,
    filter: HistoryFilter,
    { after, limit }: { after?: readonly string[] | undefined; limit: number },
  ): Promise<HistoryEntry[]> {
    const conditions = conditionsOf(filter)
    if (after) {
      // the pair finds the place; the time alone lets PostgreSQL leave out the months that are newer
      conditions.push(sql`at <= ${after[0]}::timestamptz`)
      conditions.push(sql`(at, id) < (${after[0]}::timestamptz, ${after[1]}::bigint)`)
    }
    const where = conditions.length === 0 ? sql`` : sql`where ${sql.join(conditions, sql` and `)}`
    const order = sql`order by at desc, id desc limit ${limit}`
    // A family's entries lie close together in time. Left to itself PostgreSQL takes them for evenly spread and walks the
    // whole history for the page's end; the fence makes it fetch the family by its index and sort that.
    const from = filter.family
      ? sql`from (select * from history ${where} offset 0) family ${order}`
      : sql`from history ${where} ${order}`
    const { rows } = await sql<HistoryEntry>`
      select id, at, to_char(at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.US"Z"') as at_text, actor_id, actor_name,
        actor_role, action, reason, request_id, thing, thing_id, thing_number, operation, old, new
      ${from}`.execute(db)
    return rows
  }

  /** When the first of these rows was written. */
  async firstOf(db: Executor, members: readonly FamilyMember[]): Promise<string | undefined> {
    const { rows } = await sql<{ first: string | null }>`
      select min(at)::text as first from history where ${anyOf(members)}`.execute(db)
    return rows[0]?.first ?? undefined
  }

  /** The first moment of a day in the laboratory's zone, and the first after it. */
  async boundsOf(db: Executor, day: string): Promise<{ begins: string; ends: string }> {
    const { rows } = await sql<{ begins: string; ends: string }>`
      select (${day}::date::timestamp at time zone zone)::text as begins,
        ((${day}::date + 1)::timestamp at time zone zone)::text as ends
      from (select coalesce((select time_zone from laboratory), 'UTC') as zone) laboratory`.execute(db)
    const [bounds] = rows
    if (!bounds) throw new Error('The day has no bounds.')
    return bounds
  }

  async listPeople(db: Executor): Promise<{ id: string; name: string }[]> {
    const { rows } = await sql<{
      id: string
      name: string
    }>`select id, name from users order by lower(name), id`.execute(db)
    return rows
  }

  /** Every table whose changes are written down. */
  async listThings(db: Executor): Promise<string[]> {
    const { rows } = await sql<{ thing: string }>`
      select c.relname::text as thing from pg_trigger t join pg_class c on c.oid = t.tgrelid
      where t.tgname = 'z_history' and not t.tgisinternal order by 1`.execute(db)
    return rows.map(({ thing }) => thing)
  }

  /** Hops from one action to the next in the index: as many steps as actions, however many entries there are. */
  async listActions(db: Executor): Promise<string[]> {
    const { rows } = await sql<{ action: string }>`
      with recursive actions as (
        (select action from history order by action limit 1)
        union all
        select (select h.action from history h where h.action > actions.action order by h.action limit 1)
        from actions where actions.action is not null
      )
      select action from actions where action is not null`.execute(db)
    return rows.map(({ action }) => action)
  }
}

function conditionsOf(filter: HistoryFilter): RawBuilder<unknown>[] {
  const conditions: RawBuilder<unknown>[] = []
  if (filter.actorId !== undefined) conditions.push(sql`actor_id = ${filter.actorId}`)
  if (filter.thing !== undefined) conditions.push(sql`thing = ${filter.thing}`)
  if (filter.thingId !== undefined) conditions.push(sql`thing_id = ${filter.thingId}`)
  if (filter.action !== undefined) conditions.push(sql`action = ${filter.action}`)
  if (filter.since !== undefined) conditions.push(sql`at >= ${filter.since}::timestamptz`)
  if (filter.until !== undefined) conditions.push(sql`at < ${filter.until}::timestamptz`)
  if (filter.familySince !== undefined) conditions.push(sql`at >= ${filter.familySince}::timestamptz`)
  if (filter.family !== undefined) {
    conditions.push(anyOf(filter.family))
  } else if (filter.number !== undefined) {
    conditions.push(sql`thing_number = ${filter.number}`)
  }
  return conditions
}

function anyOf(members: readonly FamilyMember[]): RawBuilder<unknown> {
  const each = members.map(({ thing, ids }) => sql`(thing = ${thing} and thing_id = any(${ids}::bigint[]))`)
  return sql`(${sql.join(each, sql` or `)})`
}
