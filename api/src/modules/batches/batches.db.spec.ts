import {
  addVerification,
  changeBatch,
  changePosition,
  getBatch,
  getSample,
  invalidateCalibration,
  listBatches,
  openBatch,
  recordFindingAction,
  saveReadings,
  type BatchView,
} from '@weirlight/shared/contracts'
import type { Problem } from '@weirlight/shared/errors'
import pg from 'pg'
import { describe, expect, it, vi } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import { aBatchForm, anOpenBatch, aReadBatch } from '../../testing/builders/batches.builders.js'
import { aLot, anAnalyst, aSigner, authorise, daysFromToday } from '../../testing/builders/bench.builders.js'
import { aCalibrationInForce } from '../../testing/builders/calibrations.builders.js'
import { anAcceptedSample, aReceivedSample } from '../../testing/builders/samples.builders.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { SamplesService } from '../samples/index.js'
import { BatchesModule } from './index.js'

// Expected values are constructed where nothing else is said; the line is that of the calibration's builder.
const at = useTestApp({ imports: [BatchesModule] })
const database = () => at().database
const rowOf = (batch: BatchView, kind: BatchView['rows'][number]['kind'], nth = 0) => {
  const row = batch.rows.filter((one) => one.kind === kind)[nth]
  if (!row) throw new Error(`no ${kind}`)
  return row
}
const cell = (
  batch: BatchView,
  absorbance: string,
  changes: { replicate?: number; position?: number; reason?: string } = {},
) => {
  const row = batch.rows[(changes.position ?? 5) - 1]
  const replicate = changes.replicate ?? 1
  const now = row?.readings.find((one) => one.replicate === replicate)
  return {
    positionId: row?.id ?? '',
    replicate,
    absorbance,
    supersedes: now?.id ?? null,
    ...(changes.reason === undefined ? {} : { reason: changes.reason }),
  }
}
const conflicts = (sent: { status: number; json: unknown }[]) => {
  expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
  return sent.find(({ status }) => status === 409)?.json as Problem
}

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
    const lost = conflicts(
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
})

describe('readings', () => {
  it('are judged as they are saved: concentration, uncertainty, controls, limits', async () => {
    const { batch } = await aReadBatch(at(), {
      samples: [
        ['0.0500', '0.0503'],
        ['0.0300', '0.0302'],
        ['0.0012', '0.0011'],
      ],
    })
    // about 0.25 mg/L against the EU indicator of 200 µg/L
    const [above, below, nothing] = [0, 1, 2].map((nth) => rowOf(batch, 'sample', nth).assessment)
    expect(above).toMatchObject({ verdict: 'above', unit: 'ug/L', flags: [] })
    const [intercept, slope] = batch.rules.fit['coefficients'] as [number, number]
    expect(above?.concentration).toBeCloseTo((0.05015 - intercept) / slope, 12)
    expect(above?.expandedUncertainty).toBeGreaterThan(0)
    expect(below).toMatchObject({ verdict: 'below' })
    expect(nothing?.reportedText).toMatch(/^</)
    expect(rowOf(batch, 'verification').assessment).toMatchObject({ qcPassed: true })
    expect(rowOf(batch, 'control').assessment).toMatchObject({ qcPassed: true })
    expect(rowOf(batch, 'method-blank').assessment).toMatchObject({ qcPassed: true })
    expect(rowOf(batch, 'duplicate').assessment).toMatchObject({ qcPassed: true })
    expect(batch).toMatchObject({ read: batch.positions, aboveLimit: 1, findings: 0 })
  })

  it('a correction needs its reason, keeps the first reading, and stands in the list of corrections', async () => {
    const { batch, analyst } = await aReadBatch(at(), { sampleCount: 1 })
    const agent = await at().as(analyst)
    const silent = await agent.refused(saveReadings, {
      params: { id: batch.id },
      body: { source: 'typed', readings: [cell(batch, '0.0511')] },
    })
    expect(silent.errors).toEqual([
      { path: 'readings.0.reason', message: 'Say in a few words why the reading is corrected.' },
    ])
    const corrected = await agent.call(saveReadings, {
      params: { id: batch.id },
      body: { source: 'typed', readings: [cell(batch, '0.0511', { reason: 'Digits swapped' })] },
    })
    expect(corrected.rows[4]?.readings[0]).toMatchObject({ absorbance: '0.0511', corrected: true })
    expect(corrected.corrections).toMatchObject([
      {
        what: 'Position 5, reading 1',
        from: '0.0500',
        to: '0.0511',
        by: analyst.name,
        reason: 'Digits swapped',
      },
    ])
    expect(corrected.version).toBe(batch.version + 1)
    const kept = await database()
      .db.read.selectFrom('positionReadings')
      .select(['absorbanceText', 'reason'])
      .where('positionId', '=', batch.rows[4]?.id ?? '')
      .where('replicate', '=', 1)
      .orderBy('id')
      .execute()
    expect(kept.map(({ absorbanceText }) => absorbanceText)).toEqual(['0.0500', '0.0511'])
  })

  it('two people in one cell at once: one reading stands, the other is told whose', async () => {
    const { batch, analyst } = await anOpenBatch(at(), { sampleCount: 1 })
    const other = await anAnalyst(database(), { name: 'Ben Sluice' })
    const [first, second] = await Promise.all([at().as(analyst), at().as(other)])
    const input = (absorbance: string) => ({
      params: { id: batch.id },
      body: {
        source: 'typed' as const,
        readings: [cell(batch, absorbance), cell(batch, absorbance, { replicate: 2 })],
      },
    })
    const lost = conflicts(
      await Promise.all([
        first.send(saveReadings, input('0.0500')),
        second.send(saveReadings, input('0.0600')),
      ]),
    )
    expect(lost.code).toBe('stale')
    expect(lost.errors?.map(({ path }) => path)).toEqual(['readings.0', 'readings.1'])
    expect(lost.errors?.[0]?.message).toContain(lost.conflict?.changedBy ?? 'nobody')
    expect([analyst.name, 'Ben Sluice']).toContain(lost.conflict?.changedBy)
  })

  it('two people in different cells at once: both are saved', async () => {
    const { batch, analyst } = await anOpenBatch(at(), { sampleCount: 1 })
    const other = await anAnalyst(database())
    const [first, second] = await Promise.all([at().as(analyst), at().as(other)])
    const input = (position: number) => ({
      params: { id: batch.id },
      body: { source: 'typed' as const, readings: [cell(batch, '0.0500', { position })] },
    })
    await Promise.all([first.call(saveReadings, input(5)), second.call(saveReadings, input(3))])
    const view = await first.call(getBatch, { params: { id: batch.id } })
    expect(view.rows.filter(({ readings }) => readings.length === 1).map(({ position }) => position)).toEqual(
      [3, 5],
    )
    expect(view.alsoHere).toEqual([])
    await second.call(getBatch, { params: { id: batch.id } })
    expect((await first.call(getBatch, { params: { id: batch.id } })).alsoHere).toEqual([other.name])
  })

  it('sent again after a lost answer change nothing', async () => {
    const { batch, analyst } = await anOpenBatch(at(), { sampleCount: 1 })
    const agent = await at().as(analyst)
    const input = {
      params: { id: batch.id },
      body: { source: 'typed' as const, readings: [cell(batch, '0.0500')] },
    }
    const once = await agent.call(saveReadings, input)
    const again = await agent.call(saveReadings, input)
    expect(again.version).toBe(once.version)
    expect(again.rows[4]?.readings).toHaveLength(1)
  })

  it('one bad entry and none is saved', async () => {
    const { batch, analyst } = await anOpenBatch(at(), { sampleCount: 1 })
    const agent = await at().as(analyst)
    const problem = await agent.refused(saveReadings, {
      params: { id: batch.id },
      body: { source: 'pasted', readings: [cell(batch, '0.0500'), cell(batch, '0.0500', { replicate: 3 })] },
    })
    expect(problem.errors?.[0]?.path).toBe('readings.1')
    const absurd = await agent.refused(saveReadings, {
      params: { id: batch.id },
      body: { source: 'pasted', readings: [cell(batch, '0.0500'), cell(batch, '5.1', { replicate: 2 })] },
    })
    expect(absurd.errors?.[0]).toEqual({
      path: 'readings.1.absorbance',
      message: 'The absorbance must lie between -0.5 and 4.',
    })
    expect((await agent.call(getBatch, { params: { id: batch.id } })).read).toBe(0)
  })

  it('are not taken by the unauthorised, under an ended calibration, nor with an expired reagent', async () => {
    const { batch, analyst } = await anOpenBatch(at(), { sampleCount: 1 })
    const input = {
      params: { id: batch.id },
      body: { source: 'typed' as const, readings: [cell(batch, '0.0500')] },
    }
    const outsider = await at().as(await aUser(database().db))
    expect((await outsider.refused(saveReadings, input)).detail).toContain('not authorised')
    const agent = await at().as(analyst)
    const lot = batch.reagentLots[0]
    const setLot = (state: string) =>
      database().db.transaction(SYSTEM, 'material.change', 'test', (trx) =>
        trx
          .updateTable('materialLots')
          .set({ state })
          .where('id', '=', lot?.id ?? '')
          .execute(),
      )
    await setLot('withdrawn')
    expect((await agent.refused(saveReadings, input)).detail).toContain(lot?.number ?? 'none')
    await setLot('in-use')
    const qa = await at().as(await aSigner(database()))
    const ended = await qa.call(invalidateCalibration, {
      params: { id: batch.calibrationId },
      body: { version: 3, reason: 'Lamp' },
    })
    expect(ended.batches).toEqual([{ id: batch.id, number: batch.number }])
    expect((await agent.refused(saveReadings, input)).detail).toContain('is invalidated')
  })

  it('go on under a calibration that was replaced meanwhile', async () => {
    const first = await aCalibrationInForce(at())
    const { batch, analyst } = await anOpenBatch(at(), {
      sampleCount: 1,
      calibrationId: first.id,
      methodId: first.methodId,
    })
    await aCalibrationInForce(at(), { instrumentId: first.instrumentId })
    const agent = await at().as(analyst)
    const saved = await agent.call(saveReadings, {
      params: { id: batch.id },
      body: { source: 'typed', readings: [cell(batch, '0.0500')] },
    })
    expect(saved.rows[4]?.readings).toHaveLength(1)
  })

  it('are closed once the batch is submitted, and open again when it is sent back', async () => {
    const { batch, analyst } = await anOpenBatch(at(), { sampleCount: 1 })
    const setState = (state: string) =>
      database().db.transaction(SYSTEM, 'batch.submit', 'test', (trx) =>
        trx.updateTable('batches').set({ state }).where('id', '=', batch.id).execute(),
      )
    const agent = await at().as(analyst)
    const input = {
      params: { id: batch.id },
      body: { source: 'typed' as const, readings: [cell(batch, '0.0500')] },
    }
    await setState('submitted')
    expect((await agent.refused(saveReadings, input)).detail).toContain('submitted for review')
    await setState('returned')
    expect((await agent.call(saveReadings, input)).state).toBe('open')
  })
})

describe('positions', () => {
  it('a dilution multiplies the result; after a reading it needs a reason and is listed', async () => {
    const { batch, analyst } = await aReadBatch(at(), { sampleCount: 1 })
    const agent = await at().as(analyst)
    const sample = rowOf(batch, 'sample')
    const input = (body: object) => ({
      params: { id: sample.id },
      body: { version: sample.version, dilution: '10', note: '', ...body },
    })
    expect((await agent.refused(changePosition, input({}))).errors?.[0]?.path).toBe('reason')
    expect((await agent.refused(changePosition, input({ dilution: '0.5' }))).errors?.[0]?.path).toBe(
      'dilution',
    )
    const diluted = await agent.call(changePosition, input({ reason: 'Diluted 1 to 10, not written down' }))
    const [before, after] = [sample, rowOf(diluted, 'sample')].map(
      ({ assessment }) => assessment.concentration ?? 0,
    )
    expect(after).toBeCloseTo((before ?? 0) * 10, 10)
    expect(diluted.corrections).toMatchObject([
      { what: 'Position 5, dilution', from: '1', to: '10', by: analyst.name },
    ])
    const old = await agent.refused(changePosition, input({ dilution: '5', reason: 'Once more' }))
    expect(old.code).toBe('stale')
    const control = rowOf(batch, 'control')
    const standard = await agent.refused(changePosition, {
      params: { id: control.id },
      body: { version: control.version, dilution: '2', note: '', reason: 'Try' },
    })
    expect(standard.errors?.[0]?.message).toBe('Blanks and standards are read undiluted.')
  })

  it('two people change one position at once: one wins', async () => {
    const { batch, analyst } = await anOpenBatch(at(), { sampleCount: 1 })
    const agent = await at().as(analyst)
    const sample = rowOf(batch, 'sample')
    const input = (dilution: string) => ({
      params: { id: sample.id },
      body: { version: sample.version, dilution, note: '' },
    })
    const lost = conflicts(
      await Promise.all([agent.send(changePosition, input('2')), agent.send(changePosition, input('5'))]),
    )
    expect(lost.code).toBe('stale')
  })

  it('the reagent’s time is in order with the readings', async () => {
    const { batch, analyst } = await aReadBatch(at(), { sampleCount: 1 })
    const agent = await at().as(analyst)
    const put = (colourStartedAt: string | null, version = batch.version) => ({
      params: { id: batch.id },
      body: { version, colourStartedAt, note: 'Bench 2' },
    })
    expect((await agent.refused(changeBatch, put('2099-01-01T00:00:00Z'))).errors?.[0]?.message).toContain(
      'future',
    )
    const now = new Date(database().clock.now().getTime()).toISOString()
    expect((await agent.refused(changeBatch, put(now))).errors?.[0]?.message).toContain('first reading')
    // read within seconds: the method asks for 10 minutes (fixtures/reference/methods/fe-phenanthroline.json)
    const early = new Date(Date.parse(now) - 60_000).toISOString()
    const changed = await agent.call(changeBatch, put(early))
    expect(
      changed.findingsList.some(({ id, severity }) => id.startsWith('early-') && severity === 'caution'),
    ).toBe(true)
    expect(changed.findings).toBe(changed.findingsList.length)
    const lost = conflicts(
      await Promise.all([
        agent.send(changeBatch, put(early, changed.version)),
        agent.send(changeBatch, put(early, changed.version)),
      ]),
    )
    expect(lost.code).toBe('stale')
  })

  it('a further verification goes to the end', async () => {
    const { batch, analyst } = await anOpenBatch(at(), { sampleCount: 1 })
    const agent = await at().as(analyst)
    const input = { params: { id: batch.id }, body: { version: batch.version } }
    const sent = await Promise.all([agent.send(addVerification, input), agent.send(addVerification, input)])
    expect(conflicts(sent).code).toBe('stale')
    const view = await agent.call(getBatch, { params: { id: batch.id } })
    expect(view.rows.slice(-2).map(({ kind, position, expected }) => [kind, position, expected])).toEqual([
      ['verification', batch.positions + 1, '2.00'],
      ['blank', batch.positions + 2, null],
    ])
  })
})

describe('findings', () => {
  it('a failed control is found, and what was done about it is kept', async () => {
    const { batch, analyst } = await anOpenBatch(at(), { sampleCount: 1 })
    const agent = await at().as(analyst)
    const control = rowOf(batch, 'control')
    const bad = await agent.call(saveReadings, {
      params: { id: batch.id },
      body: {
        source: 'typed',
        readings: [
          cell(batch, '0.1500', { position: control.position }),
          cell(batch, '0.1502', { position: control.position, replicate: 2 }),
        ],
      },
    })
    const finding = bad.findingsList.find(({ positionId }) => positionId === control.id)
    // 0.1501 A over 0.197 A per mg/L is 76 % of 1.00 mg/L; 90 to 110 % are allowed (fixtures/reference, common practice)
    expect(finding).toMatchObject({ severity: 'failed', action: null })
    expect(finding?.what).toMatch(/^Control sample: 76\.\d %, allowed 90 to 110 %\.$/)
    const acted = await agent.call(recordFindingAction, {
      params: { id: batch.id },
      body: { findingId: finding?.id ?? '', kind: 'explained', text: 'Pipette tip loose; read again below' },
    })
    expect(acted.findingsList.find(({ id }) => id === finding?.id)?.action).toMatchObject({
      kind: 'explained',
      by: analyst.name,
    })
    expect(acted.findings).toBe(bad.findings - 1)
    const gone = await agent.refused(recordFindingAction, {
      params: { id: batch.id },
      body: { findingId: 'control-1', kind: 'explained', text: 'Nothing there' },
    })
    expect(gone.errors?.[0]?.path).toBe('findingId')
  })

  it('a reading after the holding time is a failed check', async () => {
    const now = database().clock.now().getTime()
    const form = await aBatchForm(at(), { sampleCount: 1 })
    const batchForm = { ...form }
    await database().owner.transaction(SYSTEM, 'test.age', 'test', (trx) =>
      trx
        .updateTable('determinations')
        .set({ holdingDueAt: new Date(now - 3_600_000) })
        .where('id', '=', form.determinationIds[0] ?? '')
        .execute(),
    )
    const analyst = await anAnalyst(database())
    const agent = await at().as(analyst)
    const batch = await agent.call(openBatch, { body: batchForm })
    expect(rowOf(batch, 'sample').holding?.state).toBe('breached')
    const read = await agent.call(saveReadings, {
      params: { id: batch.id },
      body: { source: 'typed', readings: [cell(batch, '0.0500')] },
    })
    expect(read.findingsList.find(({ id }) => id.startsWith('holding-'))).toMatchObject({
      severity: 'failed',
    })
  })
})

describe('the list', () => {
  it('shows what the runs came to without computing them, and pages by key', async () => {
    const { batch } = await aReadBatch(at(), { sampleCount: 1 })
    const auditor = await at().as(await aUser(database().db, { role: 'auditor' }))
    const first = await auditor.call(listBatches, { query: { limit: 1 } })
    expect(first.items[0]).toMatchObject({
      number: batch.number,
      read: batch.positions,
      aboveLimit: batch.aboveLimit,
      findings: batch.findings,
      samples: 1,
    })
    const next = await auditor.call(listBatches, { query: { limit: 1, after: first.next ?? '' } })
    expect(Number(next.items[0]?.id)).toBeLessThan(Number(batch.id))
    expect((await auditor.call(listBatches, { query: { state: 'released' } })).items).toEqual([])
    expect((await auditor.refused(getBatch, { params: { id: '999999' } })).code).toBe('not-found')
    const client = await at().as(await aUser(database().db, { role: 'client' }))
    expect((await client.refused(getBatch, { params: { id: batch.id } })).code).toBe('forbidden')
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
