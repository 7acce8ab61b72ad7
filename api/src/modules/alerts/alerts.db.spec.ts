import {
  acknowledgeAlert,
  cancelAlert,
  closeAlert,
  getAlert,
  listAlerts,
  type AlertView,
} from '@weirlight/shared/contracts'
import type { Problem } from '@weirlight/shared/errors'
import type { Actor } from '@weirlight/shared/permissions'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import { JobsService } from '../../platform/index.js'
import { aSigner } from '../../testing/builders/bench.builders.js'
import { theReference } from '../../testing/builders/reference.builders.js'
import {
  aContact,
  aReleasedBatch,
  aReleasedResult,
  BELOW,
  theBench,
} from '../../testing/builders/results.builders.js'
import { aPoint } from '../../testing/builders/samples.builders.js'
import { FakeSmtp } from '../../testing/fake-smtp.js'
import { letMailLeave, mailAbout } from '../../testing/mailbox.js'
import { aProgramme, aUser } from '../../testing/people.js'
import { createTestApp, type TestApp } from '../../testing/test-app.js'
import { ResultsModule } from '../results/index.js'
import { AlertsModule, AlertsService } from './index.js'
import { sweepAlerts } from './jobs/alerts.jobs.js'

// Absorbances and what they come to are constructed; the limit is eu-fe-indicator, 200 µg/L (fixtures/reference/limits.json).
const smtp = new FakeSmtp()
let app: TestApp
const at = () => app
beforeAll(async () => {
  await smtp.start()
  app = await createTestApp({ imports: [ResultsModule, AlertsModule], settings: { smtpUrl: smtp.url } })
})
afterAll(async () => {
  await app.close()
  await smtp.stop()
})

const alertsOf = (resultIds: readonly string[]) =>
  at()
    .database.db.fresh.selectFrom('alerts')
    .selectAll()
    .where('resultId', 'in', [...resultIds])
    .orderBy('id')
    .execute()
async function anAlert() {
  const released = await aReleasedResult(at())
  const [alert] = await alertsOf([released.result.id])
  if (!alert) throw new Error('No alert was raised.')
  const client = await aUser(at().database.db, { role: 'client', clientId: released.clientId })
  return { ...released, alert, client }
}
const as = (actor: Actor) => at().as(actor)
const byClient = (recipient: string) => recipient.endsWith('@utility.example')
function oneWins(sent: { status: number; json: unknown }[]): Problem {
  expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
  return sent.find(({ status }) => status === 409)?.json as Problem
}

describe('an alert', () => {
  it('is raised with the release for a result above the limit, and for no other', async () => {
    const { batch } = await aReleasedBatch(at(), { samples: [['0.0500', '0.0503'], BELOW] })
    const ids = batch.rows.flatMap(({ resultId }) => resultId ?? [])
    const alerts = await alertsOf(ids)
    expect(alerts).toHaveLength(1)
    expect(alerts[0]).toMatchObject({ resultId: ids[0], state: 'raised' })
    expect(alerts[0]?.number).toMatch(/^A-\d\d-\d{4}$/)
    const { reviewer } = await theBench(at())
    const view = await (await as(reviewer)).call(getAlert, { params: { id: alerts[0]?.id ?? '' } })
    expect(view).toMatchObject({
      limitValue: '200',
      limitUnit: 'ug/L',
      unit: 'ug/L',
      decisionRule: 'simple',
      limitKind: 'indicator',
      sampleNumber: batch.rows.find(({ kind }) => kind === 'sample')?.sampleNumber,
      acknowledgedBy: null,
    })
    expect(view.caution).toContain('not a determination of compliance')
    expect(view.clocks.map(({ duty }) => duty).length).toBeGreaterThan(0)
  })

  it('is raised once, however often the release is told', async () => {
    const { result, alert } = await anAlert()
    const { reviewer } = await theBench(at())
    const tell = () =>
      at().database.db.transaction(reviewer, 'batch.release', null, (trx) =>
        at()
          .get(AlertsService)
          .raise(trx, { resultIds: [result.id] }),
      )
    await Promise.all([tell(), tell()])
    expect((await alertsOf([result.id])).map(({ id }) => id)).toEqual([alert.id])
  })

  it('is raised for limits that raise alerts alone, also where a higher limit is the one reported against', async () => {
    const limits = async (rows: { value: string; raisesAlert: boolean }[]) => {
      await theReference(at().database)
      const programme = await aProgramme(at().database.db)
      await at().database.db.transaction(SYSTEM, 'limit.add', null, (trx) =>
        trx
          .insertInto('limits')
          .values(
            rows.map(({ value, raisesAlert }) => ({
              programmeId: programme.id,
              analyte: 'Fe',
              form: 'total',
              kind: 'permit',
              name: `Permit ${value}`,
              value,
              valueText: value,
              unit: 'mg/L',
              digits: 2,
              decisionRule: 'simple',
              raisesAlert,
              source: 'constructed',
              edition: '1',
              mark: 'constructed',
              validFrom: '2020-01-01',
            })),
          )
          .execute(),
      )
      const point = await aPoint(at().database)
      await at().database.db.transaction(SYSTEM, 'client.change', null, (trx) =>
        trx
          .updateTable('clients')
          .set({ programmeId: programme.id })
          .where('id', '=', point.clientId)
          .execute(),
      )
      const { result } = await aReleasedResult(at(), { clientId: point.clientId, pointId: point.id })
      return { result, alerts: await alertsOf([result.id]) }
    }
    const quiet = await limits([{ value: '0.20', raisesAlert: false }])
    expect([quiet.result.verdict, quiet.alerts]).toEqual(['above', []])
    // about 0.25 mg/L lies above both; the certificate compares with the higher one, the alert with the one that raises it
    const both = await limits([
      { value: '0.20', raisesAlert: true },
      { value: '0.24', raisesAlert: false },
    ])
    expect([both.result.limitValue, both.alerts.length]).toEqual(['0.24', 1])
    const { reviewer } = await theBench(at())
    const view = await (await as(reviewer)).call(getAlert, { params: { id: both.alerts[0]?.id ?? '' } })
    expect([view.limitName, view.limitValue]).toEqual(['Permit 0.20', '0.20'])
  })

  it('is mailed to the alert contacts of the client and the QA managers, and is notified when the client’s has left', async () => {
    const point = await aPoint(at().database)
    const contact = (email: string, changes: object = {}) =>
      aContact(at().database, { clientId: point.clientId, email, ...changes })
    await contact('works@utility.example')
    await contact('paper@utility.example', { getsAlerts: false })
    await contact('gone@utility.example', { active: false })
    const retired = await aSigner(at().database)
    await at().database.db.transaction(SYSTEM, 'user.disable', null, (trx) =>
      trx.updateTable('users').set({ status: 'disabled' }).where('id', '=', retired.userId).execute(),
    )
    const { result } = await aReleasedResult(at(), { clientId: point.clientId, pointId: point.id })
    const [alert] = await alertsOf([result.id])
    const id = alert?.id ?? ''
    const mails = await mailAbout(at(), { kind: 'alert', id })
    const managers = await at()
      .database.db.read.selectFrom('users')
      .select('email')
      .where('role', '=', 'qa-manager')
      .where('status', '=', 'active')
      .execute()
    expect(mails.map(({ recipient }) => recipient).sort()).toEqual(
      ['works@utility.example', ...managers.map(({ email }) => email)].sort(),
    )
    const toClient = mails.find(({ recipient }) => byClient(recipient))
    expect(toClient?.subject).toContain(`Alert ${alert?.number ?? ''}: Iron, total ${result.text} µg/L`)
    expect(toClient?.bodyText).toContain(`/our/alerts/${id}`)
    expect(toClient?.bodyText).toContain('It is not a determination of compliance or violation.')
    expect(toClient?.bodyText).toContain(`${result.limitName ?? ''}: 200 µg/L`)

    await letMailLeave(at(), (recipient) => !byClient(recipient))
    expect((await alertsOf([result.id]))[0]?.state).toBe('raised')
    await letMailLeave(at())
    const [notified] = await alertsOf([result.id])
    expect(notified?.state).toBe('notified')
    // house-acknowledge: 24 hours from notified (fixtures/reference/clocks.json)
    expect((notified?.answerDueAt?.getTime() ?? 0) - (notified?.notifiedAt?.getTime() ?? 0)).toBeCloseTo(
      24 * 3_600_000,
      -3,
    )
    expect(smtp.received.filter(({ to }) => to.includes('works@utility.example'))).toHaveLength(1)
  })

  it('whose mail left as the process died is found by the sweep', async () => {
    const { alert } = await anAlert()
    await at().database.owner.unwatched((trx) =>
      trx
        .updateTable('mailMessages')
        .set({ state: 'sent', sentAt: at().database.clock.now() })
        .where('aboutKind', '=', 'alert')
        .where('aboutId', '=', alert.id)
        .execute(),
    )
    await at().get(JobsService).runNow(sweepAlerts, {})
    await at().get(JobsService).runNow(sweepAlerts, {})
    const after = await alertsOf([alert.resultId])
    expect(after[0]?.state).toBe('notified')
    const entries = await at()
      .database.db.read.selectFrom('history')
      .select('actorRole')
      .where('action', '=', 'alert.notify')
      .where('thingId', '=', alert.id)
      .execute()
    expect(entries).toEqual([{ actorRole: 'system' }])
  })

  it('is raised although a name holds a line break, which a mail’s subject cannot', async () => {
    const point = await aPoint(at().database)
    await at().database.db.transaction(SYSTEM, 'point.change', null, (trx) =>
      trx
        .updateTable('samplingPoints')
        .set({ name: 'Outlet\nof the works' })
        .where('id', '=', point.id)
        .execute(),
    )
    await aContact(at().database, { clientId: point.clientId, email: 'lines@utility.example' })
    const { result } = await aReleasedResult(at(), { clientId: point.clientId, pointId: point.id })
    const [alert] = await alertsOf([result.id])
    const [mail] = await mailAbout(at(), { kind: 'alert', id: alert?.id ?? '' })
    expect(mail?.subject).toContain('at Outlet of the works, above')
  })
})

describe('answering', () => {
  const answer = (alert: { id: string; version: number }, note = 'We flush the main') => ({
    params: { id: alert.id },
    body: { version: alert.version, note },
  })

  it('is for the client whose alert it is; nobody else sees that it exists', async () => {
    const { alert, client } = await anAlert()
    const other = await anAlert()
    const stranger = await as(other.client)
    expect((await stranger.refused(getAlert, { params: { id: alert.id } })).code).toBe('not-found')
    expect((await stranger.refused(acknowledgeAlert, answer(alert))).code).toBe('not-found')
    const listed = await stranger.call(listAlerts, { query: { clientId: alert.clientId } })
    expect(listed.items.map(({ id }) => id)).toEqual([other.alert.id])
    const { reviewer, analyst } = await theBench(at())
    for (const actor of [reviewer, analyst]) {
      expect((await (await as(actor)).refused(acknowledgeAlert, answer(alert))).code).toBe('forbidden')
    }
    const answered = await (await as(client)).call(acknowledgeAlert, answer(alert))
    expect(answered).toMatchObject({
      state: 'acknowledged',
      acknowledgedBy: { id: client.userId, name: client.name },
      acknowledgement: 'We flush the main',
    })
    // the laboratory's own people stay unseen
    expect(answered.deliveries.map(({ to }) => to).every(byClient)).toBe(true)
    const seen = await (await as(reviewer)).call(getAlert, { params: { id: alert.id } })
    expect(seen.deliveries.length).toBeGreaterThan(answered.deliveries.length)
  })

  it('a mail that leaves after the answer does not take it back', async () => {
    const { alert, client } = await anAlert()
    await (await as(client)).call(acknowledgeAlert, answer(alert))
    await letMailLeave(at())
    expect((await alertsOf([alert.resultId]))[0]?.state).toBe('acknowledged')
  })

  it('two people of the client at once: one answer counts', async () => {
    const { alert, client, clientId } = await anAlert()
    const second = await aUser(at().database.db, { role: 'client', clientId })
    const [a, b] = await Promise.all([as(client), as(second)])
    const problem = oneWins(
      await Promise.all([
        a.send(acknowledgeAlert, answer(alert, 'first')),
        b.send(acknowledgeAlert, answer(alert, 'second')),
      ]),
    )
    expect(problem.code).toBe('stale')
    const late = await b.refused(acknowledgeAlert, answer({ ...alert, version: alert.version + 1 }))
    expect(late.code).toBe('not-allowed-now')
  })
})

describe('closing and cancelling', () => {
  const reasoned = (alert: { id: string; version: number }, reason = 'Confirmed and settled') => ({
    params: { id: alert.id },
    body: { version: alert.version, reason },
  })
  async function answered(): Promise<{ alert: AlertView; manager: Actor }> {
    const { alert, client } = await anAlert()
    const view = await (
      await as(client)
    ).call(acknowledgeAlert, {
      params: { id: alert.id },
      body: { version: alert.version, note: '' },
    })
    return { alert: view, manager: (await theBench(at())).reviewer }
  }

  it('an answered alert is closed with a reason; an unanswered one is not', async () => {
    const open = await anAlert()
    const { alert, manager } = await answered()
    const agent = await as(manager)
    expect((await agent.refused(closeAlert, reasoned(open.alert))).detail).toContain(
      'only one that is acknowledged can be closed',
    )
    const closed = await agent.call(closeAlert, reasoned(alert))
    expect(closed).toMatchObject({
      state: 'closed',
      closedBy: { id: manager.userId },
      closingNote: 'Confirmed and settled',
    })
    expect((await agent.refused(cancelAlert, reasoned(closed))).code).toBe('not-allowed-now')
  })

  it('a cancelled one is told to everybody who was told of it, once', async () => {
    const { alert } = await anAlert()
    const { reviewer } = await theBench(at())
    const told = (await mailAbout(at(), { kind: 'alert', id: alert.id })).map(({ recipient }) => recipient)
    const cancelled = await (await as(reviewer)).call(cancelAlert, reasoned(alert, 'Sample was mixed up'))
    expect(cancelled.state).toBe('cancelled')
    const again = await mailAbout(at(), { kind: 'cancelled-alert', id: alert.id })
    expect(again.map(({ recipient }) => recipient).sort()).toEqual([...told].sort())
    expect(again[0]?.bodyText).toContain('Reason: Sample was mixed up')
    // the first message, leaving late, does not bring it back
    await letMailLeave(at())
    expect((await alertsOf([alert.resultId]))[0]?.state).toBe('cancelled')
  })

  it('two at once: one closes, one cancels, one answers while another cancels; each time one wins', async () => {
    const second = await aSigner(at().database)
    const first = await answered()
    const [a, b] = await Promise.all([as(first.manager), as(second)])
    oneWins(
      await Promise.all([
        a.send(closeAlert, reasoned(first.alert)),
        b.send(closeAlert, reasoned(first.alert)),
      ]),
    )
    const two = await answered()
    oneWins(
      await Promise.all([a.send(closeAlert, reasoned(two.alert)), b.send(cancelAlert, reasoned(two.alert))]),
    )
    const three = await anAlert()
    oneWins(
      await Promise.all([
        a.send(cancelAlert, reasoned(three.alert)),
        b.send(cancelAlert, reasoned(three.alert)),
      ]),
    )
    const four = await anAlert()
    const client = await as(four.client)
    oneWins(
      await Promise.all([
        a.send(cancelAlert, reasoned(four.alert)),
        client.send(acknowledgeAlert, {
          params: { id: four.alert.id },
          body: { version: four.alert.version, note: '' },
        }),
      ]),
    )
  })
})

describe('the list', () => {
  it('pages newest first and filters by state and client', async () => {
    const one = await anAlert()
    const two = await anAlert()
    const { reviewer } = await theBench(at())
    const agent = await as(reviewer)
    const page = await agent.call(listAlerts, { query: { limit: 1 } })
    expect(page.items.map(({ id }) => id)).toEqual([two.alert.id])
    const next = await agent.call(listAlerts, { query: { limit: 1, after: page.next ?? '' } })
    expect(next.items.map(({ id }) => id)).toEqual([one.alert.id])
    const own = await agent.call(listAlerts, { query: { clientId: one.clientId } })
    expect(own.items.map(({ id }) => id)).toEqual([one.alert.id])
    expect(
      (await agent.call(listAlerts, { query: { clientId: one.clientId, state: 'closed' } })).items,
    ).toEqual([])
  })
})
