import {
  exportHistory,
  historyFilters,
  listHistory,
  listSeals,
  verifySeals,
} from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import { beforeAll, describe, expect, it } from 'vitest'
import { SealsService, type Database } from '../../platform/index.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { HistoryModule } from './history.module.js'

const at = useTestApp({ imports: [HistoryModule] })

/** Entries as triggers would have written them over a year, many at once. */
async function load(db: Database, count: number): Promise<void> {
  await db.unwatched(async (trx) => {
    await sql`select history_make_partitions((now() - interval '13 months')::date, now()::date)`.execute(trx)
    await sql`insert into history (at, actor_id, actor_name, actor_role, action, thing, thing_id, thing_number, operation, new)
      select now() - g * interval '5 minutes', 7000 + g % 12, 'Person ' || g % 12, 'technician',
        (array['load.first', 'load.second', 'load.third'])[1 + g % 3],
        (array['position_readings', 'samples', 'results'])[1 + g % 3], g,
        case when g % 3 = 1 then 'S-25-' || g end, 'insert', jsonb_build_object('id', g)
      from generate_series(1, ${count}::int) g`.execute(trx)
    await sql`analyze history`.execute(trx)
  })
}

describe('seals', () => {
  it('are listed and checked', async () => {
    const agent = await at().as(await aUser(at().database.db, { role: 'auditor' }))
    await at().get(SealsService).seal()
    const { items } = await agent.call(listSeals, { query: {} })
    expect(items.at(-1)).toMatchObject({ id: '1', previousHead: null })
    const check = await agent.call(verifySeals, {})
    expect(check).toMatchObject({ ok: true, brokenAt: null, head: items[0]?.head })
  })
})

describe('the history page', () => {
  beforeAll(async () => {
    const { owner } = at().database
    await owner.transaction(await aUser(owner), 'laboratory.set-up', null, async (trx) => {
      await sql`insert into laboratory (name, address, accreditation, time_zone, email, phone)
        values ('Test', '', '', 'America/New_York', 'lab@test.example', '')`.execute(trx)
    })
    await load(owner, 100_000)
  })

  it('pages through a hundred thousand entries by key, each entry once, newest first', async () => {
    const agent = await at().as(await aUser(at().database.db, { role: 'auditor' }))
    const seen: string[] = []
    let after: string | undefined
    for (let page = 0; page < 5; page += 1) {
      const answer = await agent.call(listHistory, {
        query: { thing: 'results', limit: 200, ...(after ? { after } : {}) },
      })
      expect(answer.items.every(({ thing }) => thing === 'results')).toBe(true)
      seen.push(...answer.items.map(({ thingId }) => thingId))
      after = answer.next ?? undefined
    }
    expect(new Set(seen).size).toBe(1000)
    // constructed: every third entry, the younger the smaller its number
    expect(seen).toEqual(Array.from({ length: 1000 }, (_, i) => String(3 * i + 2)))
  })

  it('reads no more of the table than it shows', async () => {
    const { owner } = at().database
    for (const condition of [sql`true`, sql`actor_id = 7003`, sql`thing_number = 'S-25-301'`]) {
      const { rows } = await sql<{
        'QUERY PLAN': [{ Plan: { 'Shared Hit Blocks': number; 'Shared Read Blocks': number } }]
      }>`
        explain (analyze, buffers, format json)
        select * from history where ${condition} order by at desc, id desc limit 51`.execute(owner.read)
      const { Plan } = (rows[0] as unknown as Record<string, [{ Plan: Record<string, number> }]>)[
        'QUERY PLAN'
      ]?.[0] ?? { Plan: {} }
      // the whole table has thousands of blocks
      expect((Plan['Shared Hit Blocks'] ?? 1e9) + (Plan['Shared Read Blocks'] ?? 1e9)).toBeLessThan(500)
    }
  })

  it('filters by person, action, and days of the laboratory’s zone', async () => {
    const agent = await at().as(await aUser(at().database.db, { role: 'auditor' }))
    const byPerson = await agent.call(listHistory, { query: { actorId: '7003', limit: 20 } })
    expect(byPerson.items.map(({ actorId }) => actorId)).toEqual(Array.from({ length: 20 }, () => '7003'))
    const byAction = await agent.call(listHistory, { query: { action: 'load.second', limit: 5 } })
    expect(new Set(byAction.items.map(({ action }) => action))).toEqual(new Set(['load.second']))

    const { rows } = await at().database.owner.pool.query<{ first: Date; last: Date; day: string }>(
      `with day as (select ((now() at time zone 'America/New_York')::date - 30) as d)
       select d::text as day, d::timestamp at time zone 'America/New_York' as first,
         (d + 1)::timestamp at time zone 'America/New_York' as last from day`,
    )
    const [day] = rows
    if (!day) throw new Error('no day')
    const items = []
    let after: string | undefined
    do {
      const answer = await agent.call(listHistory, {
        query: { from: day.day, to: day.day, limit: 200, ...(after ? { after } : {}) },
      })
      items.push(...answer.items)
      after = answer.next ?? undefined
    } while (after)
    const hours = (day.last.getTime() - day.first.getTime()) / 3_600_000
    // constructed: one entry every five minutes of that day in New York
    expect(items.length).toBe(hours * 12)
    for (const { at: when } of items) {
      expect(Date.parse(when)).toBeGreaterThanOrEqual(day.first.getTime())
      expect(Date.parse(when)).toBeLessThan(day.last.getTime())
    }
    const refused = await agent.refused(listHistory, { query: { from: '2026-03-02', to: '2026-03-01' } })
    expect(refused.errors?.[0]?.path).toBe('to')
  })

  it('refuses a page that was made up', async () => {
    const agent = await at().as(await aUser(at().database.db, { role: 'auditor' }))
    const after = Buffer.from(JSON.stringify(["'; drop table history", '1'])).toString('base64url')
    expect((await agent.refused(listHistory, { query: { after } })).code).toBe('invalid-input')
  })

  it('offers people, things and actions to filter by', async () => {
    const auditor = await aUser(at().database.db, { role: 'auditor', name: 'Zoë Auditor' })
    const { people, things, actions } = await (await at().as(auditor)).call(historyFilters, {})
    expect(people).toContainEqual({ id: auditor.userId, name: 'Zoë Auditor' })
    expect(things).toEqual(expect.arrayContaining(['samples', 'position_readings', 'users']))
    expect(actions).toEqual(expect.arrayContaining(['load.first', 'load.second', 'load.third']))
    expect(new Set(actions).size).toBe(actions.length)
  })

  it('exports what the filter finds, and no cell that a spreadsheet would run', async () => {
    const { db } = at().database
    const actor = await aUser(db, { role: 'administrator', name: '=HYPERLINK("http://x.example")' })
    await db.transaction(actor, 'user.change', '+cmd|calc', (trx) =>
      trx.updateTable('users').set({ name: 'plain' }).where('id', '=', actor.userId).execute(),
    )
    const agent = await at().as(await aUser(db, { role: 'auditor' }))
    const file = await agent.file(exportHistory, { query: { actorId: actor.userId } })
    expect(file.headers['content-type']).toContain('text/csv')
    const text = file.bytes.toString('utf8')
    expect(text).toContain(`"'=HYPERLINK(""http://x.example"")"`)
    expect(text).toContain(`'+cmd|calc`)
    const all = await agent.file(exportHistory, { query: { action: 'load.first' } })
    // constructed: every third of a hundred thousand, and the header
    expect(all.bytes.toString('utf8').trimEnd().split('\r\n')).toHaveLength(33_333 + 1)
  })

  it('is closed to technicians and clients', async () => {
    const { db } = at().database
    for (const role of ['technician', 'client'] as const) {
      const agent = await at().as(await aUser(db, { role }))
      expect((await agent.refused(listHistory, { query: {} })).code).toBe('forbidden')
    }
    expect((await at().anonymous().refused(exportHistory, { query: {} })).code).toBe('signed-out')
  })
})

describe('a number', () => {
  it('finds what belongs to it: an instrument’s checks too, and nothing of another', async () => {
    const { db } = at().database
    const actor = await aUser(db)
    const made: string[] = []
    for (const number of ['I-26-81', 'I-26-82']) {
      await db.transaction(actor, 'instrument.add', null, async (trx) => {
        const { rows } = await sql<{
          id: string
        }>`insert into instruments (number, name, kind, serial, location, bandwidth_nm)
          values (${number}, 'x', 'x', 'x', 'x', '2') returning id`.execute(trx)
        const id = rows[0]?.id ?? ''
        made.push(id)
        await sql`insert into instrument_checks (instrument_id, kind, reference, nominal, found, tolerance, unit, passed, checked_by, next_due_on)
          values (${id}, 'wavelength', 'holmium', '536.5', '536.6', '1', 'nm', true, ${actor.userId}, '2030-01-01')`.execute(
          trx,
        )
      })
    }
    const agent = await at().as(await aUser(db, { role: 'auditor' }))
    const { items } = await agent.call(listHistory, { query: { number: ' i-26-81 ' } })
    expect(items.map(({ thing }) => thing).sort()).toEqual(['instrument_checks', 'instruments'])
    expect(items.find(({ thing }) => thing === 'instruments')?.thingId).toBe(made[0])
    expect((await agent.call(listHistory, { query: { number: 'S-25-301' } })).items).toHaveLength(1)
    expect((await agent.call(listHistory, { query: { number: 'S-99-00001' } })).items).toEqual([])
  })
})
