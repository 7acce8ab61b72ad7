import {
  acknowledgeAlert,
  cancelAlert,
  closeAlert,
  getAlert,
  listAlerts,
  type AlertView,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { describe, expect, it } from 'vitest'
import { aSigner } from '../../testing/builders/bench.builders.js'
import { theBench } from '../../testing/builders/results.builders.js'
import { FakeSmtp } from '../../testing/fake-smtp.js'
import { letMailLeave, mailAbout } from '../../testing/mailbox.js'
import { oneWins } from '../../testing/one-wins.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { ResultsModule } from '../results/index.js'
import { alertsOf, anAlert, byClient } from './alerts.test-support.js'
import { AlertsModule } from './index.js'

const at = useTestApp({ imports: [ResultsModule, AlertsModule], smtp: new FakeSmtp() })

describe('answering', () => {
  const answer = (alert: { id: string; version: number }, note = 'We flush the main') => ({
    params: { id: alert.id },
    body: { version: alert.version, note },
  })

  it('is for the client whose alert it is; nobody else sees that it exists', async () => {
    const { alert, client } = await anAlert(at())
    const other = await anAlert(at())
    const stranger = await at().as(other.client)
    expect((await stranger.refused(getAlert, { params: { id: alert.id } })).code).toBe('not-found')
    expect((await stranger.refused(acknowledgeAlert, answer(alert))).code).toBe('not-found')
    const listed = await stranger.call(listAlerts, { query: { clientId: alert.clientId } })
    expect(listed.items.map(({ id }) => id)).toEqual([other.alert.id])
    const { reviewer, analyst } = await theBench(at())
    for (const actor of [reviewer, analyst]) {
      expect((await (await at().as(actor)).refused(acknowledgeAlert, answer(alert))).code).toBe('forbidden')
    }
    const answered = await (await at().as(client)).call(acknowledgeAlert, answer(alert))
    expect(answered).toMatchObject({
      state: 'acknowledged',
      acknowledgedBy: { id: client.userId, name: client.name },
      acknowledgement: 'We flush the main',
    })
    // the laboratory's own people stay unseen
    expect(answered.deliveries.map(({ to }) => to).every(byClient)).toBe(true)
    const seen = await (await at().as(reviewer)).call(getAlert, { params: { id: alert.id } })
    expect(seen.deliveries.length).toBeGreaterThan(answered.deliveries.length)
  })

  it('a mail that leaves after the answer does not take it back', async () => {
    const { alert, client } = await anAlert(at())
    await (await at().as(client)).call(acknowledgeAlert, answer(alert))
    await letMailLeave(at())
    expect((await alertsOf(at(), [alert.resultId]))[0]?.state).toBe('acknowledged')
  })

  it('two people of the client at once: one answer counts', async () => {
    const { alert, client, clientId } = await anAlert(at())
    const second = await aUser(at().database.db, { role: 'client', clientId })
    const [a, b] = await Promise.all([at().as(client), at().as(second)])
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
    const { alert, client } = await anAlert(at())
    const view = await (
      await at().as(client)
    ).call(acknowledgeAlert, {
      params: { id: alert.id },
      body: { version: alert.version, note: '' },
    })
    return { alert: view, manager: (await theBench(at())).reviewer }
  }

  it('an answered alert is closed with a reason; an unanswered one is not', async () => {
    const open = await anAlert(at())
    const { alert, manager } = await answered()
    const agent = await at().as(manager)
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
    const { alert } = await anAlert(at())
    const { reviewer } = await theBench(at())
    const told = (await mailAbout(at(), { kind: 'alert', id: alert.id })).map(({ recipient }) => recipient)
    const cancelled = await (
      await at().as(reviewer)
    ).call(cancelAlert, reasoned(alert, 'Sample was mixed up'))
    expect(cancelled.state).toBe('cancelled')
    const again = await mailAbout(at(), { kind: 'cancelled-alert', id: alert.id })
    expect(again.map(({ recipient }) => recipient).sort()).toEqual([...told].sort())
    expect(again[0]?.bodyText).toContain('Reason: Sample was mixed up')
    // the first message, leaving late, does not bring it back
    await letMailLeave(at())
    expect((await alertsOf(at(), [alert.resultId]))[0]?.state).toBe('cancelled')
  })

  it('two at once: one closes, one cancels, one answers while another cancels; each time one wins', async () => {
    const second = await aSigner(at().database)
    const first = await answered()
    const [a, b] = await Promise.all([at().as(first.manager), at().as(second)])
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
    const three = await anAlert(at())
    oneWins(
      await Promise.all([
        a.send(cancelAlert, reasoned(three.alert)),
        b.send(cancelAlert, reasoned(three.alert)),
      ]),
    )
    const four = await anAlert(at())
    const client = await at().as(four.client)
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
