import { portalNow, portalResults, portalTrend, portalUtility } from '@weirlight/shared/contracts'
import { beforeAll, describe, expect, it } from 'vitest'
import { ABOVE, aReleasedResult, aSubmittedBatch, BELOW } from '../../testing/builders/results.builders.js'
import { anAcceptedSample } from '../../testing/builders/samples.builders.js'
import type { Agent } from '../../testing/agent.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { CertificatesModule } from '../certificates/index.js'
import { ResultsModule } from '../results/index.js'
import { PortalModule } from './index.js'

// Absorbances and what they come to are constructed.
const at = useTestApp({ imports: [ResultsModule, CertificatesModule, PortalModule] })
type Released = Awaited<ReturnType<typeof aReleasedResult>>
let own: Released
let quiet: Released
let other: Released
let unreleased: string
let us: Agent
let them: Agent

beforeAll(async () => {
  own = await aReleasedResult(at(), { reading: ABOVE })
  const { clientId, pointId } = own
  quiet = await aReleasedResult(at(), { clientId, pointId, reading: BELOW })
  other = await aReleasedResult(at(), { reading: ABOVE })
  const waiting = await anAcceptedSample(at(), { clientId, pointId })
  await aSubmittedBatch(at(), { determinationIds: waiting.details.map(({ id }) => id) })
  unreleased = waiting.number
  const { db } = at().database
  us = await at().as(await aUser(db, { role: 'client', clientId }))
  them = await at().as(await aUser(db, { role: 'client', clientId: other.clientId }))
}, 60_000)

describe('the client’s own page', () => {
  it('shows its unanswered alerts with trend and certificate, and its latest released results', async () => {
    const now = await us.call(portalNow, {})
    expect(now.clientName).toBe(own.result.clientName)
    expect(now.alerts).toHaveLength(1)
    const [alert] = now.alerts
    expect(alert).toMatchObject({ resultId: own.result.id, text: own.result.text, limitValue: '200' })
    expect(alert?.trend.points.map(({ resultId }) => resultId).sort()).toEqual(
      [own.result.id, quiet.result.id].sort(),
    )
    const certificate = await at()
      .database.db.read.selectFrom('certificates')
      .select('id')
      .where('sampleId', '=', own.sampleId)
      .executeTakeFirstOrThrow()
    expect(alert?.certificateId).toBe(certificate.id)
    expect(now.recent.map(({ id }) => id)).toEqual([quiet.result.id, own.result.id])
    const text = JSON.stringify(now)
    for (const foreign of [other.result.clientName, other.result.sampleNumber, unreleased]) {
      expect(text).not.toContain(foreign)
    }
  })

  it('lists what was released to it alone, whatever it asks for', async () => {
    const all = await us.call(portalResults, { query: {} })
    expect(all.items.map(({ id }) => id)).toEqual([quiet.result.id, own.result.id])
    expect(all.items.every(({ state }) => state === 'released')).toBe(true)
    const page = await us.call(portalResults, { query: { limit: 1 } })
    const next = await us.call(portalResults, { query: { limit: 1, after: page.next ?? '' } })
    expect(next.items.map(({ id }) => id)).toEqual([own.result.id])
    expect((await us.call(portalResults, { query: { pointId: other.pointId } })).items).toEqual([])
    // a filter that the contract does not know cannot widen it
    const forced = await us.raw({ method: 'GET', url: `/api/portal/results?clientId=${other.clientId}` })
    expect((forced.json as typeof all).items.map(({ id }) => id)).toEqual(all.items.map(({ id }) => id))
  })

  it('draws the trend of its own points alone', async () => {
    const trend = await us.call(portalTrend, { query: { pointId: own.pointId, analyte: 'Fe' } })
    expect(trend.points).toHaveLength(2)
    expect((await them.call(portalTrend, { query: { pointId: own.pointId, analyte: 'Fe' } })).points).toEqual(
      [],
    )
  })

  it('knows its points and contacts', async () => {
    const utility = await us.call(portalUtility, {})
    expect(utility.name).toBe(own.result.clientName)
    expect(utility.points.map(({ id }) => id)).toEqual([own.pointId])
    expect(utility.contacts.map(({ email }) => email)).toEqual([`works-${own.clientId}@utility.example`])
  })
})
