import { getSample, listSamples, receiveSample } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { aPoint, aReceivingForm } from '../../testing/builders/samples.builders.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { LaboratoryModule } from '../laboratory/index.js'
import { SamplesModule } from './index.js'
import { technician } from './samples.test-support.js'

const at = useTestApp({ imports: [LaboratoryModule, SamplesModule] })
const HOUR = 3_600_000

describe('receiving', () => {
  it('gives a number, checks the sample and keeps its holding times', async () => {
    const agent = await technician(at())
    const form = await aReceivingForm(at(), { methodCodes: ['fe-phenanthroline', 'mn-persulfate'] })
    const sample = await agent.call(receiveSample, { body: form })
    expect(sample.number).toMatch(/^S-\d\d-\d{5}$/)
    expect(sample).toMatchObject({ state: 'received', suggested: 'accepted', purpose: 'operational' })
    expect(sample.details).toHaveLength(2)
    const [iron] = sample.details
    expect(iron).toMatchObject({ analyte: 'Fe', state: 'requested', batchId: null, resultId: null })
    // 180 days from collection: 40 CFR 136.3 Table II, as read in fixtures/reference
    expect(Date.parse(iron?.holding.dueAt ?? '') - Date.parse(form.collectedAt)).toBe(180 * 24 * HOUR)
    expect(sample.holding?.rule).toContain('metals in acid')
    expect(await agent.call(getSample, { params: { id: sample.id } })).toMatchObject({
      number: sample.number,
    })
  })

  it('makes one sample of a form sent twice, also at the same moment', async () => {
    const agent = await technician(at())
    const form = await aReceivingForm(at())
    const [a, b] = await Promise.all([
      agent.call(receiveSample, { body: form }),
      agent.call(receiveSample, { body: form }),
    ])
    const c = await agent.call(receiveSample, { body: { ...form, collectedBy: 'somebody else' } })
    expect(new Set([a.number, b.number, c.number]).size).toBe(1)
    expect(c.collectedBy).toBe(form.collectedBy)
    expect(c.details).toHaveLength(1)
  })

  it('names every field that cannot be', async () => {
    const agent = await technician(at())
    const other = await aPoint(at().database)
    const form = await aReceivingForm(at(), { methodCodes: ['fe-phenanthroline', 'fe-ferrozine'] })
    const future = new Date(Date.parse(form.receivedAt) + 48 * HOUR).toISOString()
    const problem = await agent.refused(receiveSample, {
      body: { ...form, pointId: other.id, collectedAt: future, receivedAt: future },
    })
    expect(problem.code).toBe('invalid-input')
    expect(problem.errors).toEqual([
      { path: 'pointId', message: `${other.code} is not a sampling point of this client.` },
      { path: 'collectedAt', message: 'Collected in the future: check the date.' },
      { path: 'receivedAt', message: 'Received in the future: check the date.' },
      { path: 'determinations.1.methodId', message: 'Iron by ferrozine is no longer in use.' },
    ])
    const early = await agent.refused(receiveSample, {
      body: { ...form, receivedAt: '2020-01-01T00:00:00Z' },
    })
    expect(early.errors?.[0]?.path).toBe('receivedAt')
    const comma = await agent.refused(receiveSample, { body: { ...form, ph: '1,6' } })
    expect(comma.errors).toEqual([{ path: 'ph', message: 'Use a decimal point: 1.6.' }])
  })

  it('is for the bench: an auditor reads, a client does not', async () => {
    const form = await aReceivingForm(at())
    const auditor = await at().as(await aUser(at().database.db, { role: 'auditor' }))
    expect((await auditor.refused(receiveSample, { body: form })).code).toBe('forbidden')
    expect((await auditor.call(listSamples, { query: {} })).items).toBeInstanceOf(Array)
    const client = await at().as(await aUser(at().database.db, { role: 'client' }))
    expect((await client.refused(listSamples, { query: {} })).code).toBe('forbidden')
  })
})
