import { getAlert } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
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
import { aProgramme } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { ResultsModule } from '../results/index.js'
import { alertsOf, anAlert, byClient } from './alerts.test-support.js'
import { AlertsModule, AlertsService } from './index.js'
import { sweepAlerts } from './jobs/alerts.jobs.js'

// Absorbances and what they come to are constructed; the limit is eu-fe-indicator, 200 µg/L (fixtures/reference/limits.json).
const smtp = new FakeSmtp()
const at = useTestApp({ imports: [ResultsModule, AlertsModule], smtp })

describe('an alert', () => {
  it('is raised with the release for a result above the limit, and for no other', async () => {
    const { batch } = await aReleasedBatch(at(), { samples: [['0.0500', '0.0503'], BELOW] })
    const ids = batch.rows.flatMap(({ resultId }) => resultId ?? [])
    const alerts = await alertsOf(at(), ids)
    expect(alerts).toHaveLength(1)
    expect(alerts[0]).toMatchObject({ resultId: ids[0], state: 'raised' })
    expect(alerts[0]?.number).toMatch(/^A-\d\d-\d{4}$/)
    const { reviewer } = await theBench(at())
    const view = await (await at().as(reviewer)).call(getAlert, { params: { id: alerts[0]?.id ?? '' } })
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
    const { result, alert } = await anAlert(at())
    const { reviewer } = await theBench(at())
    const tell = () =>
      at().database.db.transaction(reviewer, 'batch.release', null, (trx) =>
        at()
          .get(AlertsService)
          .raise(trx, { resultIds: [result.id] }),
      )
    await Promise.all([tell(), tell()])
    expect((await alertsOf(at(), [result.id])).map(({ id }) => id)).toEqual([alert.id])
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
      return { result, alerts: await alertsOf(at(), [result.id]) }
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
    const view = await (await at().as(reviewer)).call(getAlert, { params: { id: both.alerts[0]?.id ?? '' } })
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
    const [alert] = await alertsOf(at(), [result.id])
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
    expect((await alertsOf(at(), [result.id]))[0]?.state).toBe('raised')
    await letMailLeave(at())
    const [notified] = await alertsOf(at(), [result.id])
    expect(notified?.state).toBe('notified')
    // house-acknowledge: 24 hours from notified (fixtures/reference/clocks.json)
    expect((notified?.answerDueAt?.getTime() ?? 0) - (notified?.notifiedAt?.getTime() ?? 0)).toBeCloseTo(
      24 * 3_600_000,
      -3,
    )
    expect(smtp.received.filter(({ to }) => to.includes('works@utility.example'))).toHaveLength(1)
  })

  it('whose mail left as the process died is found by the sweep', async () => {
    const { alert } = await anAlert(at())
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
    const after = await alertsOf(at(), [alert.resultId])
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
    const [alert] = await alertsOf(at(), [result.id])
    const [mail] = await mailAbout(at(), { kind: 'alert', id: alert?.id ?? '' })
    expect(mail?.subject).toContain('at Outlet of the works, above')
  })
})
