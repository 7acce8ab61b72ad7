import { openBatch, recordFindingAction, saveReadings } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import { aBatchForm, anOpenBatch } from '../../testing/builders/batches.builders.js'
import { anAnalyst } from '../../testing/builders/bench.builders.js'
import { useTestApp } from '../../testing/test-app.js'
import { cell, rowOf } from './batches.test-support.js'
import { BatchesModule } from './index.js'

// Expected values are constructed where nothing else is said; the line is that of the calibration's builder.
const at = useTestApp({ imports: [BatchesModule] })
const database = () => at().database

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
    await database().owner.transaction(SYSTEM, 'test.age', 'test', (trx) =>
      trx
        .updateTable('determinations')
        .set({ holdingDueAt: new Date(now - 3_600_000) })
        .where('id', '=', form.determinationIds[0] ?? '')
        .execute(),
    )
    const analyst = await anAnalyst(database())
    const agent = await at().as(analyst)
    const batch = await agent.call(openBatch, { body: form })
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
