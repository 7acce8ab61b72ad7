import { getBatch, invalidateCalibration, saveReadings } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import { anOpenBatch, aReadBatch } from '../../testing/builders/batches.builders.js'
import { anAnalyst, aSigner } from '../../testing/builders/bench.builders.js'
import { aCalibrationInForce } from '../../testing/builders/calibrations.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { cell, rowOf } from './batches.test-support.js'
import { BatchesModule } from './index.js'

// Expected values are constructed where nothing else is said; the line is that of the calibration's builder.
const at = useTestApp({ imports: [BatchesModule] })
const database = () => at().database

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
    const lost = oneWins(
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
