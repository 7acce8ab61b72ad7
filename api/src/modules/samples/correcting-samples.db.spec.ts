import {
  addDetermination,
  correctSample,
  listWaiting,
  withdrawDetermination,
} from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { methodId } from '../../testing/builders/reference.builders.js'
import { anAcceptedSample, aReceivedSample } from '../../testing/builders/samples.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { useTestApp } from '../../testing/test-app.js'
import { LaboratoryModule } from '../laboratory/index.js'
import { SamplesModule } from './index.js'
import { technician } from './samples.test-support.js'

const at = useTestApp({ imports: [LaboratoryModule, SamplesModule] })
const HOUR = 3_600_000

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
    const agent = await technician(at(), 'Cora Leat')
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
    const agent = await technician(at())
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
    oneWins(sent)
  })
})

describe('determinations', () => {
  it('are added once and withdrawn with a reason', async () => {
    const agent = await technician(at())
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
    const agent = await technician(at())
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
    oneWins(sent)
  })

  it('wait in the order in which their holding times run out', async () => {
    const agent = await technician(at())
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
