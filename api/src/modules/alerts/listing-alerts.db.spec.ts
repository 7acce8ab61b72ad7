import { listAlerts } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { theBench } from '../../testing/builders/results.builders.js'
import { useTestApp } from '../../testing/test-app.js'
import { ResultsModule } from '../results/index.js'
import { anAlert } from './alerts.test-support.js'
import { AlertsModule } from './index.js'

const at = useTestApp({ imports: [ResultsModule, AlertsModule] })

describe('the list', () => {
  it('pages newest first and filters by state and client', async () => {
    const one = await anAlert(at())
    const two = await anAlert(at())
    const { reviewer } = await theBench(at())
    const agent = await at().as(reviewer)
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
