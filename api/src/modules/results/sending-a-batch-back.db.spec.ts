import { getBatch, releaseBatch, returnBatch, saveReadings, submitBatch } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { aSigner, authorise } from '../../testing/builders/bench.builders.js'
import {
  ABOVE,
  aSubmittedBatch,
  BELOW,
  runReadings,
  theBench,
} from '../../testing/builders/results.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { useTestApp } from '../../testing/test-app.js'
import { ResultsModule } from './index.js'
import { determinationStatesOf, release, samplesOf, storedResults } from './review.test-support.js'

// Expected values are constructed where nothing else is said; the line is that of the calibration's builder.
const at = useTestApp({ imports: [ResultsModule] })
const database = () => at().database

describe('sending back', () => {
  it('keeps the reason, opens the bench again, and a second submission replaces the values', async () => {
    const { batch, analyst } = await aSubmittedBatch(at(), { samples: [ABOVE] })
    const { reviewer } = await theBench(at())
    const [first] = await storedResults(at(), batch.id)
    const returned = await (
      await at().as(reviewer)
    ).call(returnBatch, {
      params: { id: batch.id },
      body: { version: batch.version, reason: 'Read position 5 once more' },
    })
    expect(returned).toMatchObject({ state: 'returned', returnedReason: 'Read position 5 once more' })
    const sampleIds = samplesOf(batch).map((row) => row.sampleId ?? '')
    expect(await determinationStatesOf(at(), sampleIds)).toEqual(['in-batch'])
    const agent = await at().as(analyst)
    const corrected = await agent.call(saveReadings, {
      params: { id: batch.id },
      body: {
        source: 'typed',
        readings: runReadings(returned, [BELOW])
          .filter((entry) =>
            returned.rows.some(
              (row) => row.id === entry.positionId && ['sample', 'duplicate'].includes(row.kind),
            ),
          )
          .map((entry) => ({ ...entry, reason: 'Tube was swapped' })),
      },
    })
    expect(corrected.state).toBe('open')
    await agent.call(submitBatch, { params: { id: batch.id }, body: { version: corrected.version } })
    const [second, ...more] = await storedResults(at(), batch.id)
    expect(more).toEqual([])
    expect(second?.id).toBe(first?.id)
    expect([first?.verdict, second?.verdict]).toEqual(['above', 'below'])
    expect(second?.measuredAt.getTime()).toBeGreaterThan(first?.measuredAt.getTime() ?? 0)
    expect(await determinationStatesOf(at(), sampleIds)).toEqual(['measured'])
    // both values stay in the history
    const changes = await database()
      .db.read.selectFrom('history')
      .select(['action', 'old', 'new'])
      .where('thing', '=', 'results')
      .where('thingId', '=', first?.id ?? '')
      .orderBy('id')
      .execute()
    expect(changes.map(({ action }) => action)).toEqual(['batch.submit', 'batch.submit'])
    expect((changes[1]?.old as { concentration: number }).concentration).toBe(first?.concentration)
  })

  it('is not for whoever submitted it, and wants a reason', async () => {
    const reviewer = await aSigner(database())
    await authorise(database(), reviewer, { methodCode: 'fe-phenanthroline', activity: 'read' })
    const { batch } = await aSubmittedBatch(at(), { analyst: reviewer })
    const agent = await at().as(reviewer)
    const own = await agent.refused(returnBatch, {
      params: { id: batch.id },
      body: { version: batch.version, reason: 'I changed my mind' },
    })
    expect(own.code).toBe('own-work')
    const silent = await agent.refused(returnBatch, {
      params: { id: batch.id },
      body: { version: batch.version, reason: '' },
    })
    expect(silent.errors?.[0]?.path).toBe('reason')
  })

  it('two at once, and a return against a release: one wins', async () => {
    const { reviewer } = await theBench(at())
    const other = await aSigner(database(), { name: 'Rita Second' })
    const [a, b] = await Promise.all([at().as(reviewer), at().as(other)])
    const one = (await aSubmittedBatch(at())).batch
    const back = { params: { id: one.id }, body: { version: one.version, reason: 'Look again please' } }
    oneWins(await Promise.all([a.send(returnBatch, back), b.send(returnBatch, back)]))
    const two = (await aSubmittedBatch(at())).batch
    oneWins(
      await Promise.all([
        a.send(returnBatch, { params: { id: two.id }, body: { version: two.version, reason: 'Look again' } }),
        b.send(releaseBatch, release(two)),
      ]),
    )
    const after = await (await at().as(reviewer)).call(getBatch, { params: { id: two.id } })
    const states = (await storedResults(at(), two.id)).map(({ state }) => state)
    expect([after.state, states]).toEqual(
      after.state === 'released' ? ['released', ['released']] : ['returned', ['measured']],
    )
  })
})
