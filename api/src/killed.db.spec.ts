import { afterAll, beforeAll, expect, it } from 'vitest'
import { SYSTEM } from './platform/database/acting.js'
import { JobsService } from './platform/index.js'
import { sendMail } from './platform/mail/mail.jobs.js'
import { sessionCookie } from './testing/agent.js'
import { startApi, type ApiProcess } from './testing/api-process.js'
import { PASSPHRASE } from './testing/builders/bench.builders.js'
import { aContact, aSubmittedBatch, theBench } from './testing/builders/results.builders.js'
import { anAcceptedSample, aPoint } from './testing/builders/samples.builders.js'
import { FakeSmtp } from './testing/fake-smtp.js'
import { createTestApp, type TestApp } from './testing/test-app.js'

// The plug is pulled between release and mail: nothing may be lost, and nothing may leave twice.
const TIME = 180_000
const smtp = new FakeSmtp()
let at: TestApp
const running: ApiProcess[] = []

beforeAll(async () => {
  await smtp.start()
  at = await createTestApp({ settings: { smtpUrl: smtp.url } })
}, TIME)
afterAll(async () => {
  for (const api of running) await api.kill()
  await at.close()
  await smtp.stop()
}, TIME)

async function anApi(): Promise<ApiProcess> {
  const api = await startApi({
    NODE_ENV: 'test',
    DATABASE_URL: at.database.appUrl,
    DATABASE_POOL: '5',
    SMTP_URL: smtp.url,
    PUBLIC_URL: at.settings.publicUrl,
    SESSION_SECRET: at.settings.sessionSecret,
    PORT: '0',
    LOG_LEVEL: 'silent',
  })
  running.push(api)
  return api
}
const messages = () => at.database.db.fresh.selectFrom('mailMessages').selectAll().orderBy('id').execute()
const sentTo = (address: string) => smtp.received.filter(({ to }) => to.includes(address))

it(
  'killed between release and mail, the API sends alert and certificate once each after its restart',
  async () => {
    const bench = await theBench(at)
    const point = await aPoint(at.database)
    for (const name of ['alerts', 'certificates']) {
      await aContact(at.database, {
        clientId: point.clientId,
        email: `${name}@utility.example`,
        getsAlerts: name === 'alerts',
        getsCertificates: name === 'certificates',
      })
    }
    const sample = await anAcceptedSample(at, { clientId: point.clientId, pointId: point.id })
    const { batch } = await aSubmittedBatch(at, { determinationIds: sample.details.map(({ id }) => id) })

    // the mail server takes a message and does not answer: this is where the process dies
    smtp.onData = () => new Promise(() => undefined)
    const first = await anApi()
    const cookie = await sessionCookie({ ...at, userId: bench.reviewer.userId })
    const released = await fetch(`${first.url}/api/batches/${batch.id}/release`, {
      method: 'POST',
      headers: { cookie, 'x-weirlight': '1', 'content-type': 'application/json' },
      body: JSON.stringify({ version: batch.version, passphrase: PASSPHRASE }),
    })
    expect(released.status).toBe(200)
    await expect
      .poll(async () => (await messages()).some(({ state }) => state === 'sending'), { timeout: TIME })
      .toBe(true)
    await first.kill()
    const before = await messages()
    expect(before.filter(({ state }) => state === 'sent')).toEqual([])
    expect(smtp.received).toEqual([])
    const alert = await at.database.db.fresh.selectFrom('alerts').selectAll().executeTakeFirstOrThrow()
    expect(alert.state).toBe('raised')

    // the claims of the dead process run out after 90 seconds; the owner's clock makes them older instead of waiting
    const { clock, owner } = at.database
    clock.pin(new Date(clock.now().getTime() - 120_000))
    try {
      await owner.transaction(SYSTEM, 'test.time', null, (trx) =>
        trx
          .updateTable('mailMessages')
          .set({ claimedAt: clock.now() })
          .where('state', '=', 'sending')
          .execute(),
      )
    } finally {
      clock.unpin()
    }
    smtp.onData = () => Promise.resolve()
    const second = await anApi()
    await expect
      .poll(() => [sentTo('alerts@utility.example').length, sentTo('certificates@utility.example').length], {
        timeout: TIME,
        interval: 200,
      })
      .toEqual([1, 1])
    await expect
      .poll(async () => (await messages()).every(({ state }) => state === 'sent'), { timeout: TIME })
      .toBe(true)
    await second.stop()

    // whatever tries once more finds nothing to do
    const all = await messages()
    for (const { id } of all) await at.get(JobsService).runNow(sendMail, { id })
    for (const { recipient, key } of all) expect(sentTo(recipient), key).toHaveLength(1)
    expect(smtp.received).toHaveLength(all.length)
    const [toAlerts] = sentTo('alerts@utility.example')
    expect(toAlerts?.header('Subject')).toContain(alert.number)
    const [withCertificate] = sentTo('certificates@utility.example')
    expect(withCertificate?.raw).toContain('Content-Type: application/pdf')
    const [after, certificates, documents] = await Promise.all([
      at.database.db.fresh.selectFrom('alerts').select('state').execute(),
      at.database.db.fresh.selectFrom('certificates').select('state').execute(),
      at.database.db.fresh.selectFrom('certificateDocuments').select('sha256').execute(),
    ])
    expect([after, certificates, documents.length]).toEqual([
      [{ state: 'notified' }],
      [{ state: 'issued' }],
      1,
    ])
  },
  TIME,
)
