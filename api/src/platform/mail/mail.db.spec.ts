import { afterEach, describe, expect, it } from 'vitest'
import { FakeSmtp } from '../../testing/fake-smtp.js'
import { useTestApp } from '../../testing/test-app.js'
import { SYSTEM } from '../database/acting.js'
import { JobsService } from '../jobs/jobs.service.js'
import { sendMail, sweepMail } from './mail.jobs.js'
import { MailRepository } from './mail.repository.js'
import { MailService, type MailToQueue } from './mail.service.js'

const smtp = new FakeSmtp()
const at = useTestApp({ imports: [], smtp })

afterEach(() => {
  smtp.received.length = 0
  smtp.answers = {}
  smtp.onData = () => Promise.resolve()
})

let count = 0
async function queued(changes: Partial<MailToQueue> = {}): Promise<string> {
  count += 1
  const key = changes.key ?? `test:${count}`
  await at().database.db.transaction(SYSTEM, 'test.mail', null, (trx) =>
    at()
      .get(MailService)
      .queue(trx, {
        key,
        to: 'anna@town.example',
        subject: 'Iron above the limit – S-26-00001',
        text: 'Please look.',
        ...changes,
      }),
  )
  return (
    await at()
      .database.db.read.selectFrom('mailMessages')
      .select('id')
      .where('key', '=', key)
      .executeTakeFirstOrThrow()
  ).id
}
const stateOf = (id: string) =>
  at().database.db.read.selectFrom('mailMessages').selectAll().where('id', '=', id).executeTakeFirstOrThrow()
const send = (id: string) => at().get(JobsService).runNow(sendMail, { id })
const sweep = () => at().get(JobsService).runNow(sweepMail, {})
async function jobsFor(id: string): Promise<number> {
  const { rows } = await at().database.owner.pool.query(
    `select 1 from pgboss.job where name = 'mail.send' and data -> 'input' ->> 'id' = $1`,
    [id],
  )
  return rows.length
}

describe('mail', () => {
  it('leaves once, with its attachment and a fixed Message-ID', async () => {
    at()
      .get(MailService)
      .attach('note', (id) =>
        Promise.resolve({
          filename: `note-${id}.txt`,
          content: Buffer.from(`note ${id}`),
          contentType: 'text/plain',
        }),
      )
    const id = await queued({ attachments: [{ kind: 'note', id: '5' }], html: '<p>Please look.</p>' })
    await Promise.all([send(id), send(id), send(id), send(id)])
    await send(id)
    expect(smtp.received).toHaveLength(1)
    const [mail] = smtp.received
    expect(mail?.to).toEqual(['anna@town.example'])
    expect(mail?.raw).toContain('note-5.txt')
    const row = await stateOf(id)
    expect(mail?.header('Message-ID')).toBe(row.messageId)
    expect(row).toMatchObject({ state: 'sent', attempts: 1, lastError: null })
    expect(row.sentAt).not.toBeNull()
  })

  it('is queued once for a key, and not at all when the change is undone', async () => {
    const id = await queued({ key: 'alert:1:anna' })
    await queued({ key: 'alert:1:anna', subject: 'Again' })
    expect(await jobsFor(id)).toBe(1)
    await expect(
      at().database.db.transaction(SYSTEM, 'test.mail', null, async (trx) => {
        await at().get(MailService).queue(trx, { key: 'undone', to: 'a@b.example', subject: 'x', text: 'x' })
        throw new Error('undone')
      }),
    ).rejects.toThrow('undone')
    const rows = await at()
      .database.db.read.selectFrom('mailMessages')
      .select('id')
      .where('key', '=', 'undone')
      .execute()
    expect(rows).toEqual([])
  })

  it('waits for a mail server that is away, keeps the reason, and leaves when it is back', async () => {
    const id = await queued()
    await smtp.stop()
    await send(id)
    const waiting = await stateOf(id)
    expect(waiting).toMatchObject({ state: 'waiting', attempts: 1 })
    expect(waiting.lastError).toContain('ECONNREFUSED')
    expect(waiting.nextAttemptAt.getTime()).toBeGreaterThan(Date.now() + 5_000)
    expect(await jobsFor(id)).toBe(2)
    await smtp.start()
    await send(id) // not due yet
    expect(smtp.received).toHaveLength(0)
    await at().database.db.unwatched((trx) => at().get(MailService).retry(trx, id))
    await send(id)
    expect(smtp.received).toHaveLength(1)
    expect(await stateOf(id)).toMatchObject({ state: 'sent' })
  })

  it('whose sender died before the mail server had it is found by the sweep and leaves once', async () => {
    const id = await queued()
    const { clock, owner } = at().database
    // the claim of a process that died two minutes ago; only the owner's clock can write that time
    clock.pin(new Date(Date.now() - 120_000))
    try {
      await owner.transaction(SYSTEM, 'test.mail', null, (trx) => at().get(MailRepository).claim(trx, id))
    } finally {
      clock.unpin()
    }
    expect(await stateOf(id)).toMatchObject({ state: 'sending' })
    const before = await jobsFor(id)
    await sweep()
    expect(await jobsFor(id)).toBe(before + 1)
    await send(id)
    await sweep()
    expect(smtp.received).toHaveLength(1)
    expect(await stateOf(id)).toMatchObject({ state: 'sent', attempts: 2 })
  })

  it('is not taken from a sender that is still at it, nor marked by one whose claim ran out', async () => {
    const id = await queued()
    let deliver: () => void = () => undefined
    smtp.onData = () => new Promise((resolve) => (deliver = resolve))
    const first = send(id)
    await expect.poll(async () => (await stateOf(id)).state).toBe('sending')
    await send(id)
    await sweep()
    await new Promise((resolve) => setTimeout(resolve, 200))
    deliver()
    await first
    expect(smtp.received).toHaveLength(1)
  })

  it('fails for good after three refusals, and stays to be seen and tried again', async () => {
    const id = await queued()
    smtp.answers = { RCPT: '550 no such box' }
    for (let n = 0; n < 3; n += 1) {
      await at().database.owner.unwatched((trx) =>
        trx
          .updateTable('mailMessages')
          .set({ nextAttemptAt: new Date(0) })
          .where('id', '=', id)
          .execute(),
      )
      await send(id)
    }
    const failed = await stateOf(id)
    expect(failed).toMatchObject({ state: 'failed', attempts: 3 })
    expect(failed.lastError).toContain('no such box')
    smtp.answers = {}
    await at().database.db.unwatched((trx) => at().get(MailService).retry(trx, id))
    await send(id)
    expect(await stateOf(id)).toMatchObject({ state: 'sent' })
    expect(smtp.received).toHaveLength(1)
  })

  it.each([
    { subject: 'x\r\nBcc: other@elsewhere.example' },
    { to: 'a@b.example\r\nBcc: other@elsewhere.example' },
    { to: 'a@b.example, other@elsewhere.example' },
    { to: '' },
  ])('refuses %j', async (changes) => {
    await expect(queued(changes)).rejects.toThrow()
  })

  it('of the loaded past is kept as sent and does not leave', async () => {
    const { clock } = at().database
    clock.pin('2026-08-01T08:00:00Z')
    let id: string
    try {
      id = await queued()
    } finally {
      clock.unpin()
    }
    expect(await stateOf(id)).toMatchObject({ state: 'sent', attempts: 0 })
    await sweep()
    await send(id)
    expect(smtp.received).toHaveLength(0)
  })
})
