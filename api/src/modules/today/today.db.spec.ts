import { getToday, goTo, returnBatch } from '@weirlight/shared/contracts'
import type { Actor, Role } from '@weirlight/shared/permissions'
import { sql } from 'kysely'
import { beforeAll, describe, expect, it } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import { MailService } from '../../platform/index.js'
import { anAnalyst, aLot, aSigner, authorise, daysFromToday } from '../../testing/builders/bench.builders.js'
import { aSubmittedCalibration } from '../../testing/builders/calibrations.builders.js'
import {
  ABOVE,
  aReleasedResult,
  aRun,
  aSubmittedBatch,
  BELOW,
  theBench,
} from '../../testing/builders/results.builders.js'
import { anAcceptedSample, aReceivedSample } from '../../testing/builders/samples.builders.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'

// What the laboratory holds is constructed.
const at = useTestApp()
const today = async (actor: Actor) => (await at().as(actor)).call(getToday, {})
const HOUR = 3_600_000

let received: Awaited<ReturnType<typeof aReceivedSample>>
let open: Awaited<ReturnType<typeof aRun>>
let sentBack: Awaited<ReturnType<typeof aSubmittedBatch>>
let submitted: Awaited<ReturnType<typeof aSubmittedBatch>>
let released: Awaited<ReturnType<typeof aReleasedResult>>
let calibration: Awaited<ReturnType<typeof aSubmittedCalibration>>
let ending: { id: string; number: string }
let manager: Actor

beforeAll(async () => {
  const bench = await theBench(at())
  manager = bench.reviewer
  received = await aReceivedSample(at())
  open = await aRun(at())
  sentBack = await aSubmittedBatch(at())
  await (
    await at().as(manager)
  ).call(returnBatch, {
    params: { id: sentBack.batch.id },
    body: { version: sentBack.batch.version, reason: 'Position 5 again please' },
  })
  submitted = await aSubmittedBatch(at(), { samples: [ABOVE, BELOW] })
  released = await aReleasedResult(at())
  const preparer = await anAnalyst(at().database, { name: 'Pia Curve' })
  calibration = await aSubmittedCalibration(at(), { analyst: preparer })
  ending = await aLot(at().database, { expiresOn: daysFromToday(at().database, 5) })
  await at().database.db.unwatched((trx) =>
    at().get(MailService).queue(trx, {
      key: 'test:failed',
      to: 'gone@utility.example',
      subject: 'It never came',
      text: 'x',
    }),
  )
  await at().database.owner.unwatched((trx) =>
    trx
      .updateTable('mailMessages')
      .set({ state: 'failed', failedAt: at().database.clock.now(), lastError: '550 no such box' })
      .where('key', '=', 'test:failed')
      .execute(),
  )
  // a certificate that should have had its document an hour ago; only the owner can move its time
  await at().database.owner.transaction(SYSTEM, 'test.time', null, async (trx) => {
    await sql`alter table certificates disable trigger b_forbid_change`.execute(trx)
    await sql`alter table certificates disable trigger a_stamp_times`.execute(trx)
    await sql`update certificates set issued_at = now() - interval '1 hour' where sample_id = ${released.sampleId}`.execute(
      trx,
    )
    await sql`alter table certificates enable trigger a_stamp_times`.execute(trx)
    await sql`alter table certificates enable trigger b_forbid_change`.execute(trx)
  })
}, 120_000)

describe('today', () => {
  it('of a technician: samples to accept, batches to go on with and why one came back, lots that end', async () => {
    const { lines, counts } = await today(open.analyst)
    const by = new Map(lines.map((line) => [line.key, line]))
    expect(by.get(`sample-${received.id}`)).toMatchObject({
      action: 'Accept or reject',
      to: `/receiving/samples/${received.id}`,
    })
    expect(by.get(`batch-${open.batch.id}`)?.detail).toContain(`Opened by ${open.analyst.name}.`)
    expect(by.get(`batch-${sentBack.batch.id}`)).toMatchObject({
      detail: 'Sent back: Position 5 again please',
      tone: 'caution',
    })
    expect(by.get(`lot-${ending.id}`)?.clock).toMatchObject({ sense: 'due', prefix: 'expires' })
    expect(lines.map(({ kind }) => kind)).not.toContain('review')
    expect(counts).toMatchObject({ review: 1, calibrations: 1, alerts: 1, batches: 2 })
  })

  it('of a QA manager: what to review and sign, alerts, what was not delivered or not made', async () => {
    const { lines } = await today(manager)
    const by = new Map(lines.map((line) => [line.key, line]))
    const review = by.get(`review-${submitted.batch.id}`)
    expect(review).toMatchObject({
      action: 'Review',
      tone: 'above',
      to: `/review/batches/${submitted.batch.id}`,
    })
    expect(review?.detail).toBe('1 result above a limit is waiting. No reading was corrected.')
    // house-review: 24 hours (fixtures/reference/clocks.json)
    expect(Date.parse(review?.clock.at ?? '')).toBe(Date.parse(submitted.batch.submittedAt ?? '') + 24 * HOUR)
    expect(by.get(`calibration-${calibration.id}`)?.detail).toContain('Prepared by Pia Curve.')
    const alert = lines.find(({ kind }) => kind === 'alert')
    expect(alert?.title).toContain(`Iron ${released.result.text} µg/L, ${released.result.pointName}`)
    expect(alert?.detail).toContain('No contact of the client has been mailed yet.')
    expect(lines.find(({ kind }) => kind === 'mail')).toMatchObject({
      title: 'Not delivered: It never came',
      detail: 'To gone@utility.example. 550 no such box',
    })
    expect(lines.filter(({ key }) => key.startsWith('unrendered-'))).toHaveLength(1)
  })

  it('shows nobody their own work to sign', async () => {
    const both = await aSigner(at().database)
    await authorise(at().database, both, { methodCode: 'fe-phenanthroline', activity: 'read' })
    const mine = await aSubmittedBatch(at(), { analyst: both, samples: [BELOW] })
    expect((await today(both)).lines.map(({ key }) => key)).not.toContain(`review-${mine.batch.id}`)
    expect((await today(manager)).lines.map(({ key }) => key)).toContain(`review-${mine.batch.id}`)
  })

  it('of a client: its own alerts and certificates, and no count of the house', async () => {
    const { db } = at().database
    const client = await aUser(db, { role: 'client', clientId: released.clientId })
    const other = await aUser(db, { role: 'client' })
    const own = await today(client)
    expect(own.lines.map(({ kind }) => kind).sort()).toEqual(['alert', 'certificate'])
    expect(own.lines.every(({ to }) => to.startsWith('/our/'))).toBe(true)
    expect(own.facts).toEqual([])
    expect(own.counts).toEqual({ receiving: 0, review: 0, calibrations: 0, batches: 0, alerts: 1 })
    expect(await today(other)).toMatchObject({ lines: [], counts: { alerts: 0 } })
  })

  it('of the auditor and the administrator: alerts; people who have not come and mail that has not left', async () => {
    const { db } = at().database
    const of = async (role: Role) => (await today(await aUser(db, { role }))).lines.map(({ kind }) => kind)
    await db.transaction(SYSTEM, 'user.invite', null, (trx) =>
      trx
        .insertInto('users')
        .values({ email: 'new@people.example', name: 'New Person', role: 'technician', status: 'invited' })
        .execute(),
    )
    expect(await of('auditor')).toEqual(['alert'])
    expect((await of('administrator')).sort()).toEqual(['certificate', 'mail', 'person'])
  })

  it('puts first what runs out first, and what waits behind it, the loud before the quiet', async () => {
    const soon = await anAcceptedSample(at(), {
      methodCodes: ['cr6-diphenylcarbazide'],
      preservation: 'none',
      purpose: 'operational',
    }).catch(() => undefined)
    const { lines, now } = await today(manager)
    const due = lines
      .filter(({ clock }) => clock.sense === 'due')
      .map(({ clock }) => Date.parse(clock.at ?? ''))
    expect(due).toEqual([...due].sort((a, b) => a - b))
    if (soon) expect(lines.findIndex(({ kind }) => kind === 'holding')).toBeLessThan(5)
    const waiting = lines.filter(({ clock, tone }) => clock.sense === 'since' && tone === 'quiet')
    const loud = lines.filter(({ clock, tone }) => clock.sense === 'since' && tone === 'above')
    expect(lines.indexOf(loud.at(-1) ?? lines[0] ?? waiting[0] ?? ({} as never))).toBeLessThan(
      lines.indexOf(waiting[0] ?? lines.at(-1) ?? ({} as never)),
    )
    expect(Math.abs(Date.parse(now) - at().database.clock.now().getTime())).toBeLessThan(60_000)
  })
})

describe('a number typed anywhere', () => {
  const go = async (number: string) => (await (await at().as(manager)).call(goTo, { query: { number } })).hits

  it('leads to its page, whole, begun, or by its digits alone', async () => {
    const sample = { kind: 'sample', number: received.number, to: `/receiving/samples/${received.id}` }
    expect(await go(received.number.toLowerCase())).toEqual([expect.objectContaining(sample)])
    expect(await go(received.number.slice(-5))).toContainEqual(expect.objectContaining(sample))
    expect(await go(open.batch.number)).toEqual([
      expect.objectContaining({ kind: 'batch', to: `/batches/${open.batch.id}` }),
    ])
    expect(await go(calibration.number)).toEqual([expect.objectContaining({ kind: 'calibration' })])
    const kinds = new Set((await go('C-')).map(({ kind }) => kind))
    expect([...kinds]).toEqual(['certificate'])
  })

  it('finds nothing for what is none, and takes no wildcard', async () => {
    expect(await go('%')).toEqual([])
    expect(await go('S-99-99999')).toEqual([])
  })
})
