import { getBatch, getSample, invalidateCalibration, openBatch } from '@weirlight/shared/contracts'
import pg from 'pg'
import { describe, expect, it, vi } from 'vitest'
import { aBatchForm, anOpenBatch } from '../../testing/builders/batches.builders.js'
import { aLot, anAnalyst, aSigner, authorise, daysFromToday } from '../../testing/builders/bench.builders.js'
import { aCalibrationInForce } from '../../testing/builders/calibrations.builders.js'
import { anAcceptedSample, aReceivedSample } from '../../testing/builders/samples.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { SamplesService } from '../samples/index.js'
import { rowOf } from './batches.test-support.js'
import { BatchesModule } from './index.js'

// Expected values are constructed where nothing else is said; the line is that of the calibration's builder.
const at = useTestApp({ imports: [BatchesModule] })
const database = () => at().database

describe('opening a batch', () => {
  it('lays out the run, freezes its rules and takes the determinations', async () => {
    const { batch, analyst } = await anOpenBatch(at(), {
      sampleCount: 3,
      sample: { programme: 'eu-drinking-water', methodCodes: ['fe-phenanthroline'] },
    })
    expect(batch.number).toMatch(/^B-\d\d-\d{4}$/)
    expect(batch).toMatchObject({
      state: 'open',
      samples: 3,
      positions: 10,
      read: 0,
      findings: 0,
      replicates: 2,
    })
    expect(batch.rows.map(({ kind }) => kind)).toEqual([
      'blank',
      'verification',
      'method-blank',
      'control',
      'sample',
      'sample',
      'sample',
      'duplicate',
      'verification',
      'blank',
    ])
    const sample = rowOf(batch, 'sample')
    // EU indicator for iron, 200 µg/L: fixtures/reference/limits.json
    expect(sample.limits).toMatchObject([{ value: '200', unit: 'ug/L', kind: 'indicator' }])
    expect(sample.reporting).toMatchObject({ displayUnit: 'ug/L', nonDetect: 'less-than-loq' })
    expect(sample.reporting.digits).toBeGreaterThanOrEqual(2)
    expect(rowOf(batch, 'duplicate')).toMatchObject({
      ofPosition: 5,
      ofPositionId: sample.id,
      label: `Duplicate of ${sample.label}`,
    })
    expect(rowOf(batch, 'verification')).toMatchObject({
      expected: '2.00',
      label: 'Verification standard 2.00 mg/L',
    })
    expect(batch.rules.reportingLimit).toBe(0.05)
    expect(batch.rules.detectionLimit).toBeLessThanOrEqual(batch.rules.reportingLimit)
    // the certificate's 4 of 1000 mg/L with k = 2, and volumetric work (common practice)
    expect(batch.rules.uncertaintyComponents).toEqual([
      { name: 'volumetric work', value: 0.005, kind: 'relative' },
      { name: 'stock standard', value: 0.002, kind: 'relative' },
    ])
    const agent = await at().as(analyst)
    const taken = await agent.call(getSample, { params: { id: sample.sampleId ?? '' } })
    expect(taken.state).toBe('in-analysis')
    expect(taken.details[0]).toMatchObject({ state: 'in-batch', batchNumber: batch.number })
  })

  it('takes the limits that were valid on the day of collection', async () => {
    // iron, Canada: 0.3 mg/L until 2024-12-28, then 0.1 mg/L (fixtures/reference/limits.json)
    const technician = await aUser(database().db)
    const ids: string[] = []
    for (const collectedAt of ['2024-12-27T12:00:00Z', '2024-12-29T12:00:00Z']) {
      const sample = await aReceivedSample(at(), { programme: 'canada-drinking-water', collectedAt })
      const decided = await at().get(SamplesService).decide(technician, sample.id, {
        version: sample.version,
        verdict: 'accepted-with-qualification',
        reason: 'Holding time over',
        clientConsent: '',
      })
      ids.push(decided.details[0]?.id ?? '')
    }
    const { batch } = await anOpenBatch(at(), { determinationIds: ids })
    const values = [0, 1].map((nth) => rowOf(batch, 'sample', nth).limits.map(({ value }) => value))
    expect(values).toEqual([['0.3'], ['0.1']])
  })

  it('the same form twice, also at once, is one batch', async () => {
    const analyst = await anAnalyst(database())
    const agent = await at().as(analyst)
    const form = await aBatchForm(at(), { sampleCount: 1 })
    const [a, b] = await Promise.all([
      agent.call(openBatch, { body: form }),
      agent.call(openBatch, { body: form }),
    ])
    expect(a.number).toBe(b.number)
  })

  it('two people take the same sample at once: one wins, the other is told which batch has it', async () => {
    const [a, b] = await Promise.all([anAnalyst(database()), anAnalyst(database())])
    const form = await aBatchForm(at(), { sampleCount: 2 })
    const other = await aBatchForm(at(), { ...form, draftId: '7f3b6c56-1b1e-4f0a-8f3e-7a1d9a4f2b11' })
    const [first, second] = await Promise.all([at().as(a), at().as(b)])
    const lost = oneWins(
      await Promise.all([first.send(openBatch, { body: form }), second.send(openBatch, { body: other })]),
    )
    expect(lost.code).toBe('not-allowed-now')
    expect(lost.detail).toMatch(
      /^S-\d\d-\d{5} is already in batch B-\d\d-\d{4}\. The same holds for 1 more\.$/,
    )
    expect(lost.errors?.map(({ path }) => path)).toEqual(['determinationIds.0', 'determinationIds.1'])
  })

  it('names everything wrong with the form at once', async () => {
    const agent = await at().as(await anAnalyst(database()))
    const copper = await aLot(database(), { kind: 'control', analyte: 'Cu' })
    const expired = await aLot(database(), { kind: 'reagent', expiresOn: daysFromToday(database(), -3) })
    const form = await aBatchForm(at(), { sampleCount: 1 })
    const problem = await agent.refused(openBatch, {
      body: {
        ...form,
        verificationConcentration: '40',
        controlConcentration: '0',
        controlLotId: copper.id,
        reagentLotIds: [expired.id],
        duplicateOf: '999999',
        colourStartedAt: '2099-01-01T00:00:00Z',
      },
    })
    expect(problem.errors?.map(({ path }) => path)).toEqual([
      'duplicateOf',
      'colourStartedAt',
      'verificationConcentration',
      'controlConcentration',
      'controlLotId',
      'reagentLotIds.0',
    ])
    expect(problem.errors?.[2]?.message).toBe('The curve ends at 4 mg/L: choose one it can read.')
    expect(problem.errors?.[5]?.message).toContain('expired on')
    const comma = await agent.refused(openBatch, { body: { ...form, controlConcentration: '1,00' } })
    expect(comma.errors).toEqual([{ path: 'controlConcentration', message: 'Use a decimal point: 1.00.' }])
  })

  it('is refused without authorisation, without a calibration in force, with a sample not accepted', async () => {
    const form = await aBatchForm(at(), { sampleCount: 1 })
    const outsider = await at().as(await aUser(database().db))
    expect((await outsider.refused(openBatch, { body: form })).detail).toContain('not authorised')
    const auditor = await at().as(await aUser(database().db, { role: 'auditor' }))
    expect((await auditor.refused(openBatch, { body: form })).code).toBe('forbidden')

    const agent = await at().as(await anAnalyst(database()))
    const received = await aReceivedSample(at())
    const waiting = received.details[0]?.id ?? ''
    const notAccepted = await agent.refused(openBatch, { body: { ...form, determinationIds: [waiting] } })
    expect(notAccepted.detail).toContain('This sample is received')
    const copper = await anAcceptedSample(at(), { methodCodes: ['cu-bathocuproine'] })
    const otherMethod = await agent.refused(openBatch, {
      body: { ...form, determinationIds: [copper.details[0]?.id ?? ''] },
    })
    expect(otherMethod.detail).toContain('by another method')

    const calibration = await aCalibrationInForce(at())
    const qa = await at().as(await aSigner(database()))
    await qa.call(invalidateCalibration, {
      params: { id: calibration.id },
      body: { version: calibration.version, reason: 'Lamp' },
    })
    const invalid = await agent.refused(openBatch, { body: { ...form, calibrationId: calibration.id } })
    expect(invalid).toMatchObject({
      code: 'not-allowed-now',
      detail: expect.stringContaining('is invalidated') as string,
    })
  })

  it('a run of 26 samples has 40 positions and is opened in a handful of queries', async () => {
    const { batch, analyst } = await anOpenBatch(at(), { sampleCount: 26 })
    expect(batch.rows.filter(({ kind }) => kind === 'sample')).toHaveLength(26)
    expect(batch.positions).toBe(40)
    const agent = await at().as(analyst)
    await agent.call(getBatch, { params: { id: batch.id } })
    const asked = vi.spyOn(pg.Client.prototype, 'query')
    await agent.call(getBatch, { params: { id: batch.id } })
    const queries = asked.mock.calls.length
    asked.mockRestore()
    // batch, positions, readings, watcher (with begin and commit), dilutions, signatures, others; the session's own beside
    expect(queries).toBeLessThanOrEqual(14)
    expect(queries).toBeGreaterThan(5)
  })

  it('more than fits is refused', async () => {
    const analyst = await anAnalyst(database())
    const agent = await at().as(analyst)
    const form = await aBatchForm(at(), { sampleCount: 1 })
    const problem = await agent.refused(openBatch, {
      body: { ...form, determinationIds: Array.from({ length: 75 }, (_, index) => String(900_000 + index)) },
    })
    expect(problem.errors?.[0]).toMatchObject({
      path: 'determinationIds',
      message: expect.stringContaining('80 fit') as string,
    })
  })

  it('another method keeps to itself', async () => {
    const analyst = await anAnalyst(database())
    await authorise(database(), analyst, { methodCode: 'mn-persulfate', activity: 'read' })
    const form = await aBatchForm(at(), { sampleCount: 1 })
    const manganese = await anAcceptedSample(at(), { methodCodes: ['mn-persulfate'] })
    const refused = await (
      await at().as(analyst)
    ).refused(openBatch, {
      body: { ...form, methodId: manganese.details[0]?.methodId ?? '' },
    })
    expect(refused.errors?.[0]).toMatchObject({ path: 'calibrationId' })
  })
})
