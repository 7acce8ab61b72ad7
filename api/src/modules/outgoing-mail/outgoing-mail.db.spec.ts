import { listMail, retryMail } from '@weirlight/shared/contracts'
import { beforeAll, describe, expect, it } from 'vitest'
import { JobsService, MailService } from '../../platform/index.js'
import { sendMail } from '../../platform/mail/mail.jobs.js'
import type { Agent } from '../../testing/agent.js'
import { FakeSmtp } from '../../testing/fake-smtp.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { OutgoingMailModule } from './index.js'

const smtp = new FakeSmtp()
const at = useTestApp({ imports: [OutgoingMailModule], smtp })
let manager: Agent
const ids: string[] = []

beforeAll(async () => {
  manager = await at().as(await aUser(at().database.db, { role: 'qa-manager' }))
  for (const name of ['one', 'two', 'three']) {
    await at().database.db.unwatched((trx) =>
      at()
        .get(MailService)
        .queue(trx, {
          key: `test:${name}`,
          to: `${name}@utility.example`,
          subject: `Subject ${name}`,
          text: 'x',
          about: { kind: 'alert', id: '7' },
        }),
    )
    const row = await at()
      .database.db.fresh.selectFrom('mailMessages')
      .select('id')
      .where('key', '=', `test:${name}`)
      .executeTakeFirstOrThrow()
    ids.push(row.id)
  }
})
const send = (id: string | undefined) =>
  at()
    .get(JobsService)
    .runNow(sendMail, { id: id ?? '' })
/** Refused for good three times, each time the next try is due at once. */
async function fail(id: string | undefined) {
  smtp.answers = { RCPT: '550 no such box' }
  for (let n = 0; n < 3; n += 1) {
    await at().database.owner.unwatched((trx) =>
      trx
        .updateTable('mailMessages')
        .set({ nextAttemptAt: new Date(0) })
        .where('id', '=', id ?? '')
        .execute(),
    )
    await send(id)
  }
  smtp.answers = {}
}

describe('outgoing mail', () => {
  it('is listed newest first, with what it is about, its state and when it is tried next', async () => {
    const page = await manager.call(listMail, { query: { limit: 2 } })
    expect(page.items.map(({ id }) => id)).toEqual([ids[2], ids[1]])
    expect(page.items[0]).toMatchObject({
      to: 'three@utility.example',
      state: 'waiting',
      attempts: 0,
      aboutKind: 'alert',
      aboutId: '7',
    })
    expect(page.items[0]?.nextTryAt).not.toBeNull()
    const next = await manager.call(listMail, { query: { limit: 2, after: page.next ?? '' } })
    expect([next.items.map(({ id }) => id), next.next]).toEqual([[ids[0]], null])
  })

  it('that failed shows why, is tried again on request, and leaves', async () => {
    await fail(ids[0])
    const failed = await manager.call(listMail, { query: { state: 'failed' } })
    expect(failed.items).toEqual([expect.objectContaining({ id: ids[0], attempts: 3, nextTryAt: null })])
    expect(failed.items[0]?.lastError).toContain('no such box')
    const again = await manager.call(retryMail, { params: { id: ids[0] ?? '' } })
    expect(again).toMatchObject({ state: 'waiting', attempts: 0 })
    await send(ids[0])
    const sent = await manager.call(listMail, { query: { state: 'sent' } })
    expect(sent.items.map(({ id, sentAt }) => [id, sentAt !== null])).toEqual([[ids[0], true]])
  })

  it('that has left is not sent again, and one that is not there is not found', async () => {
    await send(ids[1])
    const problem = await manager.refused(retryMail, { params: { id: ids[1] ?? '' } })
    expect(problem).toMatchObject({ code: 'not-allowed-now' })
    expect(problem.detail).toContain('has left')
    expect((await manager.refused(retryMail, { params: { id: '999999' } })).code).toBe('not-found')
    expect(smtp.received.filter(({ to }) => to.includes('two@utility.example'))).toHaveLength(1)
  })

  it('pressed by two at once leaves once', async () => {
    await fail(ids[2])
    const other = await at().as(await aUser(at().database.db, { role: 'administrator' }))
    await Promise.all([
      manager.send(retryMail, { params: { id: ids[2] ?? '' } }),
      other.send(retryMail, { params: { id: ids[2] ?? '' } }),
    ])
    await Promise.all([send(ids[2]), send(ids[2])])
    expect(smtp.received.filter(({ to }) => to.includes('three@utility.example'))).toHaveLength(1)
  })
})
