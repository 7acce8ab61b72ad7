import { addDetermination, decideAcceptance, listWaiting } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { methodId } from '../../testing/builders/reference.builders.js'
import { aReceivedSample } from '../../testing/builders/samples.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { useTestApp } from '../../testing/test-app.js'
import { LaboratoryModule } from '../laboratory/index.js'
import { SamplesModule } from './index.js'
import { technician } from './samples.test-support.js'

const at = useTestApp({ imports: [LaboratoryModule, SamplesModule] })

describe('the decision', () => {
  it('accepts what passed, and puts it on the waiting list', async () => {
    const agent = await technician(at())
    const sample = await aReceivedSample(at())
    const accepted = await agent.call(decideAcceptance, {
      params: { id: sample.id },
      body: { version: sample.version, verdict: 'accepted', reason: '', clientConsent: '' },
    })
    expect(accepted.state).toBe('accepted')
    const waiting = await agent.call(listWaiting, { query: {} })
    expect(waiting.items.map((one) => one.sampleNumber)).toContain(sample.number)
  })

  it('does not accept in silence what failed a check', async () => {
    const agent = await technician(at())
    const sample = await aReceivedSample(at(), { ph: '2.4' })
    const decide = (body: {
      verdict: 'accepted' | 'accepted-with-qualification'
      reason: string
      clientConsent: string
    }) => ({
      params: { id: sample.id },
      body: { version: sample.version, ...body },
    })
    const silent = await agent.refused(
      decideAcceptance,
      decide({ verdict: 'accepted', reason: '', clientConsent: '' }),
    )
    expect(silent.errors?.[0]?.path).toBe('verdict')
    expect(silent.detail).toContain('pH 2.4')
    const noReason = await agent.refused(
      decideAcceptance,
      decide({ verdict: 'accepted-with-qualification', reason: ' ', clientConsent: '' }),
    )
    expect(noReason.errors?.[0]?.path).toBe('reason')
    const done = await agent.call(
      decideAcceptance,
      decide({ verdict: 'accepted-with-qualification', reason: 'Too little acid', clientConsent: '' }),
    )
    expect(done).toMatchObject({ state: 'accepted-with-qualification', acceptanceReason: 'Too little acid' })
  })

  it('a compliance sample goes on only at the client’s written wish', async () => {
    const agent = await technician(at())
    const sample = await aReceivedSample(at(), { purpose: 'compliance', programme: 'us-drinking-water' })
    expect(sample.suggested).toBe('rejected')
    const body = {
      version: sample.version,
      verdict: 'accepted-with-qualification' as const,
      reason: 'Method not approved for drinking water',
      clientConsent: '',
    }
    const refused = await agent.refused(decideAcceptance, { params: { id: sample.id }, body })
    expect(refused.errors?.[0]?.path).toBe('clientConsent')
    const done = await agent.call(decideAcceptance, {
      params: { id: sample.id },
      body: { ...body, clientConsent: 'E-mail of 2026-12-01 by D. Whitlock' },
    })
    expect(done.clientConsent).toContain('Whitlock')
  })

  it('a rejected sample leaves nothing waiting', async () => {
    const agent = await technician(at())
    const sample = await aReceivedSample(at())
    const rejected = await agent.call(decideAcceptance, {
      params: { id: sample.id },
      body: { version: sample.version, verdict: 'rejected', reason: 'Bottle broken', clientConsent: '' },
    })
    expect(rejected.state).toBe('rejected')
    expect(rejected.details.map(({ state }) => state)).toEqual(['withdrawn'])
    const again = await agent.refused(addDetermination, {
      params: { id: sample.id },
      body: { version: rejected.version, methodId: await methodId(at().database, 'mn-persulfate') },
    })
    expect(again.code).toBe('not-allowed-now')
  })

  it('two people decide at once: one wins, the other is told who', async () => {
    const [a, b] = await Promise.all([technician(at(), 'Ada Weir'), technician(at(), 'Ben Sluice')])
    const sample = await aReceivedSample(at())
    const input = (verdict: 'accepted' | 'rejected') => ({
      params: { id: sample.id },
      body: { version: sample.version, verdict, reason: 'Two at once', clientConsent: '' },
    })
    const sent = await Promise.all([
      a.send(decideAcceptance, input('accepted')),
      b.send(decideAcceptance, input('rejected')),
    ])
    const lost = oneWins(sent)
    expect(lost.code).toBe('stale')
    expect(['Ada Weir', 'Ben Sluice']).toContain(lost.conflict?.changedBy)
  })
})
