import {
  addDetermination,
  correctSample,
  decideAcceptance,
  getSample,
  listSamples,
  listWaiting,
  receiveSample,
  withdrawDetermination,
} from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { LaboratoryModule } from '../laboratory/index.js'
import { methodId } from '../../testing/builders/reference.builders.js'
import {
  anAcceptedSample,
  aPoint,
  aReceivedSample,
  aReceivingForm,
} from '../../testing/builders/samples.builders.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { SamplesModule } from './index.js'

const at = useTestApp({ imports: [LaboratoryModule, SamplesModule] })
const technician = async (name?: string) =>
  at().as(await aUser(at().database.db, name === undefined ? {} : { name }))
const HOUR = 3_600_000

describe('receiving', () => {
  it('gives a number, checks the sample and keeps its holding times', async () => {
    const agent = await technician()
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
    const agent = await technician()
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
    const agent = await technician()
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

describe('the decision', () => {
  it('accepts what passed, and puts it on the waiting list', async () => {
    const agent = await technician()
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
    const agent = await technician()
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
    const agent = await technician()
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
    const agent = await technician()
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
    const [a, b] = await Promise.all([technician('Ada Weir'), technician('Ben Sluice')])
    const sample = await aReceivedSample(at())
    const input = (verdict: 'accepted' | 'rejected') => ({
      params: { id: sample.id },
      body: { version: sample.version, verdict, reason: 'Two at once', clientConsent: '' },
    })
    const sent = await Promise.all([
      a.send(decideAcceptance, input('accepted')),
      b.send(decideAcceptance, input('rejected')),
    ])
    expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
    const lost = sent.find(({ status }) => status === 409)?.json as {
      code: string
      conflict: { changedBy: string }
    }
    expect(lost.code).toBe('stale')
    expect(['Ada Weir', 'Ben Sluice']).toContain(lost.conflict.changedBy)
  })
})

describe('corrections', () => {
  const recorded = (sample: Awaited<ReturnType<typeof aReceivedSample>>) => ({
    version: sample.version,
    reason: 'Form misread',
    collectedAt: sample.collectedAt,
    collectedBy: sample.collectedBy,
    preservation: sample.preservation,
    ph: sample.ph,
    temperatureC: sample.temperatureC,
    container: sample.container,
    filteredInField: sample.filteredInField,
    condition: sample.condition,
    remarks: sample.remarks,
  })

  it('count the holding time anew, and stand in the history with their reason', async () => {
    const agent = await technician('Cora Leat')
    const sample = await aReceivedSample(at())
    const corrected = await agent.call(correctSample, {
      params: { id: sample.id },
      body: { ...recorded(sample), ph: '2.6' },
    })
    const [before, after] = [sample.details[0]?.holding, corrected.details[0]?.holding]
    // 14 days without a verified acid against 180 with it: 40 CFR 136.3 Table II, 141.86(b)(2)
    expect(Date.parse(before?.dueAt ?? '') - Date.parse(after?.dueAt ?? '')).toBe((180 - 14) * 24 * HOUR)
    const entries = await at()
      .database.db.read.selectFrom('history')
      .select(['actorName', 'reason', 'old', 'new'])
      .where('thing', '=', 'samples')
      .where('thingId', '=', sample.id)
      .where('action', '=', 'sample.correct')
      .execute()
    expect(entries).toEqual([
      {
        actorName: 'Cora Leat',
        reason: 'Form misread',
        old: { ph: '1.6', version: 1 },
        new: { ph: '2.6', version: 2 },
      },
    ])
  })

  it('are refused without a reason, out of order, or on an old form', async () => {
    const agent = await technician()
    const sample = await aReceivedSample(at())
    const put = (changes: object) => ({
      params: { id: sample.id },
      body: { ...recorded(sample), ...changes },
    })
    expect((await agent.refused(correctSample, put({ reason: '' }))).errors?.[0]?.path).toBe('reason')
    const late = new Date(Date.parse(sample.receivedAt ?? '') + 60_000).toISOString()
    expect((await agent.refused(correctSample, put({ collectedAt: late }))).errors?.[0]?.message).toContain(
      'received before that',
    )
    const sent = await Promise.all([agent.send(correctSample, put({})), agent.send(correctSample, put({}))])
    expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
  })
})

describe('determinations', () => {
  it('are added once and withdrawn with a reason', async () => {
    const agent = await technician()
    const sample = await anAcceptedSample(at())
    const copper = await methodId(at().database, 'cu-bathocuproine')
    const more = await agent.call(addDetermination, {
      params: { id: sample.id },
      body: { version: sample.version, methodId: copper },
    })
    expect(more.details).toHaveLength(2)
    const twice = await agent.refused(addDetermination, {
      params: { id: sample.id },
      body: { version: more.version, methodId: copper },
    })
    expect(twice.errors).toEqual([{ path: 'methodId', message: 'This determination was asked for already.' }])
    const [, added] = more.details
    const less = await agent.call(withdrawDetermination, {
      params: { id: added?.id ?? '' },
      body: { version: added?.version ?? 0, reason: 'Asked for by mistake' },
    })
    expect(less.details[1]?.state).toBe('withdrawn')
    const again = await agent.refused(withdrawDetermination, {
      params: { id: added?.id ?? '' },
      body: { version: (added?.version ?? 0) + 1, reason: 'Once more' },
    })
    expect(again).toMatchObject({
      code: 'not-allowed-now',
      detail: expect.stringContaining('is withdrawn') as string,
    })
  })

  it('two people withdraw at once: one wins', async () => {
    const agent = await technician()
    const sample = await anAcceptedSample(at())
    const [one] = sample.details
    const input = {
      params: { id: one?.id ?? '' },
      body: { version: one?.version ?? 0, reason: 'Two at once' },
    }
    const sent = await Promise.all([
      agent.send(withdrawDetermination, input),
      agent.send(withdrawDetermination, input),
    ])
    expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
  })

  it('wait in the order in which their holding times run out', async () => {
    const agent = await technician()
    const soon = await anAcceptedSample(at(), {
      methodCodes: ['cr6-diphenylcarbazide'],
      collectedAt: new Date(at().database.clock.now().getTime() - 2 * HOUR).toISOString(),
      preservation: 'none',
      ph: '',
      temperatureC: '4',
    })
    const waiting = await agent.call(listWaiting, { query: {} })
    expect(waiting.items[0]?.sampleNumber).toBe(soon.number)
    const due = waiting.items.map(({ holding }) => Date.parse(holding.dueAt))
    expect(due).toEqual([...due].sort((a, b) => a - b))
    const chromium = await methodId(at().database, 'cr6-diphenylcarbazide')
    const only = await agent.call(listWaiting, { query: { methodId: chromium } })
    expect(only.items.map((one) => one.sampleNumber)).toEqual([soon.number])
    expect(only.counts.find((one) => one.methodId === chromium)?.waiting).toBe(1)
  })
})

describe('the register', () => {
  it('pages by key, newest first, and filters', async () => {
    const agent = await technician()
    const point = await aPoint(at().database)
    const numbers: string[] = []
    for (let n = 0; n < 5; n += 1) {
      const sample = await aReceivedSample(at(), { clientId: point.clientId, pointId: point.id })
      numbers.unshift(sample.number)
    }
    const first = await agent.call(listSamples, { query: { clientId: point.clientId, limit: 2 } })
    expect(first.items.map(({ number }) => number)).toEqual(numbers.slice(0, 2))
    const second = await agent.call(listSamples, {
      query: { clientId: point.clientId, limit: 2, after: first.next ?? '' },
    })
    expect(second.items.map(({ number }) => number)).toEqual(numbers.slice(2, 4))
    const byNumber = await agent.call(listSamples, { query: { number: numbers[0] ?? '' } })
    expect(byNumber.items.map(({ number }) => number)).toEqual([numbers[0]])
    // the end of a number, and its beginning in small letters, find it as well
    for (const number of [numbers[0]?.slice(-5) ?? '', numbers[0]?.toLowerCase() ?? '']) {
      const found = await agent.call(listSamples, { query: { number, clientId: point.clientId } })
      expect(found.items.map((item) => item.number)).toEqual([numbers[0]])
    }
    const begun = await agent.call(listSamples, { query: { number: 's-', clientId: point.clientId } })
    expect(begun.items.map(({ number }) => number)).toEqual(numbers)
    expect((await agent.refused(listSamples, { query: { after: 'nonsense' } })).code).toBe('invalid-input')
    expect((await agent.refused(getSample, { params: { id: '999999' } })).code).toBe('not-found')
  })
})
