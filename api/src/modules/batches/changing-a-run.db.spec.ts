import { addVerification, changeBatch, changePosition, getBatch } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { anOpenBatch, aReadBatch } from '../../testing/builders/batches.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { useTestApp } from '../../testing/test-app.js'
import { rowOf } from './batches.test-support.js'
import { BatchesModule } from './index.js'

// Expected values are constructed where nothing else is said; the line is that of the calibration's builder.
const at = useTestApp({ imports: [BatchesModule] })
const database = () => at().database

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
    const lost = oneWins(
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
    const lost = oneWins(
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
    expect(oneWins(sent).code).toBe('stale')
    const view = await agent.call(getBatch, { params: { id: batch.id } })
    expect(view.rows.slice(-2).map(({ kind, position, expected }) => [kind, position, expected])).toEqual([
      ['verification', batch.positions + 1, '2.00'],
      ['blank', batch.positions + 2, null],
    ])
  })
})
