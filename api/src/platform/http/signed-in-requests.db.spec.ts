import type { Problem } from '@weirlight/shared/errors'
import { sql } from 'kysely'
import { describe, expect, it } from 'vitest'
import { aUser } from '../../testing/people.js'
import { SYSTEM } from '../database/acting.js'
import { good, save, useHttpTestApp } from './http.test-support.js'

const at = useHttpTestApp()

describe('a session', () => {
  it('dies with the account, at once', async () => {
    const { db } = at().database
    const actor = await aUser(db)
    const agent = await at().as(actor)
    await agent.call(save, good)
    await db.transaction(SYSTEM, 'user.disable', 'left', (trx) =>
      trx.updateTable('users').set({ status: 'disabled' }).where('id', '=', actor.userId).execute(),
    )
    expect(await agent.refused(save, good)).toMatchObject({ code: 'signed-out' })
  })

  it('follows a changed role at once', async () => {
    const { db } = at().database
    const actor = await aUser(db)
    const agent = await at().as(actor)
    await db.transaction(SYSTEM, 'user.change', 'other work', (trx) =>
      trx.updateTable('users').set({ role: 'auditor' }).where('id', '=', actor.userId).execute(),
    )
    expect(await agent.refused(save, good)).toMatchObject({ code: 'forbidden' })
  })

  it.each([
    ['unused for half an hour', { seenAt: 30 }, 'signed-out'],
    ['used until a minute before', { seenAt: 29, signedInAt: 600 }, undefined],
    ['begun twelve hours ago', { seenAt: 1, signedInAt: 720 }, 'signed-out'],
  ])('%s: %o', async (_, minutesAgo, code) => {
    const { db } = at().database
    const actor = await aUser(db)
    const agent = await at().as(actor)
    const times = Object.entries(minutesAgo).map(([key, minutes]) => [key, Date.now() - minutes * 60_000])
    await db.unwatched(async (trx) => {
      const row = await trx
        .selectFrom('sessions')
        .selectAll()
        .where(sql<boolean>`sess ->> 'userId' = ${actor.userId}`)
        .executeTakeFirstOrThrow()
      const sess = { ...(row.sess as object), ...Object.fromEntries(times) }
      await trx
        .updateTable('sessions')
        .set({ sess: JSON.stringify(sess) })
        .where('sid', '=', row.sid)
        .execute()
    })
    const sent = await agent.send(save, good)
    expect((sent.json as Partial<Problem>).code).toBe(code)
  })

  it('with a cookie of somebody’s own making is nobody’s', async () => {
    const sent = await at()
      .anonymous()
      .raw({
        method: 'POST',
        url: '/api/test/things/7',
        payload: good.body,
        headers: { cookie: 'weirlight=abc.def' },
      })
    expect(sent.json).toMatchObject({ code: 'signed-out' })
    const rows = await at()
      .database.db.read.selectFrom('sessions')
      .select('sid')
      .where('sid', 'like', 'abc%')
      .execute()
    expect(rows).toEqual([])
  })
})
