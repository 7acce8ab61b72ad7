import { recordFindingAction, saveReadings, submitBatch } from '@weirlight/shared/contracts'
import { assessPosition } from '@weirlight/shared/worksheet'
import { describe, expect, it } from 'vitest'
import { aBatchForm } from '../../testing/builders/batches.builders.js'
import { anAnalyst } from '../../testing/builders/bench.builders.js'
import { ABOVE, aRun, BELOW, runReadings, theBench } from '../../testing/builders/results.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { OpeningService } from '../batches/index.js'
import { ResultsModule } from './index.js'
import { determinationStatesOf, samplesOf, storedResults } from './review.test-support.js'

// Expected values are constructed where nothing else is said; the line is that of the calibration's builder.
const at = useTestApp({ imports: [ResultsModule] })
const database = () => at().database

describe('submitting', () => {
  it('stores for each sample the very doubles the engine gives, with everything it was given', async () => {
    const { batch, analyst } = await aRun(at(), { samples: [ABOVE, BELOW] })
    const submitted = await (
      await at().as(analyst)
    ).call(submitBatch, {
      params: { id: batch.id },
      body: { version: batch.version },
    })
    expect(submitted.state).toBe('submitted')
    expect(submitted.submittedAt).not.toBeNull()
    const stored = await storedResults(at(), batch.id)
    expect(stored).toHaveLength(2)
    for (const [index, row] of samplesOf(submitted).entries()) {
      const result = stored[index]
      const again = assessPosition(
        {
          kind: 'sample',
          absorbances: (index === 0 ? ABOVE : BELOW).map(Number),
          dilution: 1,
          expected: null,
          added: null,
          parent: null,
          limits: row.limits,
          reporting: row.reporting,
        },
        submitted.rules,
      )
      // bit for bit
      expect(Object.is(result?.concentration, again.concentration)).toBe(true)
      expect(Object.is(result?.standardError, again.standardError)).toBe(true)
      expect(Object.is(result?.expandedUncertainty, again.expandedUncertainty)).toBe(true)
      expect(result?.reportedText).toBe(again.reportedText)
      expect(row.resultId).toBe(result?.id)
      expect((result?.inputs as { readings: { id: string }[] }).readings.map(({ id }) => id)).toEqual(
        row.readings.map(({ id }) => id),
      )
    }
    // 0.05015 A on a line of 0.197 A per mg/L is about 0.2546 mg/L: above 200 µg/L; 0.0200 A is about 0.1015: below
    expect(stored.map(({ verdict, unit, state }) => [verdict, unit, state])).toEqual([
      ['above', 'ug/L', 'measured'],
      ['below', 'ug/L', 'measured'],
    ])
    expect(stored[0]?.concentration).toBeCloseTo(0.2546, 2)
    expect(
      await determinationStatesOf(
        at(),
        samplesOf(batch).map((row) => row.sampleId ?? ''),
      ),
    ).toEqual(['measured', 'measured'])
  })

  it('refuses a run that is not fully read, and says which position', async () => {
    const bench = await theBench(at())
    const opened = await at()
      .get(OpeningService)
      .openBatch(bench.analyst, await aBatchForm(at(), { ...bench, sampleCount: 1 }))
    const agent = await at().as(bench.analyst)
    const partly = await agent.call(saveReadings, {
      params: { id: opened.id },
      body: { source: 'typed', readings: runReadings(opened).slice(0, -1) },
    })
    const problem = await agent.refused(submitBatch, {
      params: { id: opened.id },
      body: { version: partly.version },
    })
    expect(problem.code).toBe('not-allowed-now')
    expect(problem.detail).toContain(`Position ${opened.rows.length} is not fully read.`)
    expect(await storedResults(at(), opened.id)).toEqual([])
  })

  it('refuses a failed check in silence, and takes it once something was said; the results carry the flag', async () => {
    // 0.30 A for 2 mg/L is a recovery of about 76 %
    const { batch, analyst } = await aRun(at(), { controls: { verification: ['0.3000', '0.3002'] } })
    const agent = await at().as(analyst)
    const input = { params: { id: batch.id }, body: { version: batch.version } }
    const problem = await agent.refused(submitBatch, input)
    expect(problem.detail).toContain('Say what was done about: Verification standard')
    let version = batch.version
    for (const finding of batch.findingsList.filter(({ severity }) => severity === 'failed')) {
      const answered = await agent.call(recordFindingAction, {
        params: { id: batch.id },
        body: { findingId: finding.id, kind: 'flagged', text: 'Reported with a flag, client told' },
      })
      version = answered.version
    }
    const submitted = await agent.call(submitBatch, { params: { id: batch.id }, body: { version } })
    expect(submitted.state).toBe('submitted')
    expect((await storedResults(at(), batch.id))[0]?.flags).toContain('quality-control-failed')
  })

  it('is for those authorised to measure by the method', async () => {
    const { batch } = await aRun(at())
    const problem = await (
      await at().as(await aUser(database().db))
    ).refused(submitBatch, {
      params: { id: batch.id },
      body: { version: batch.version },
    })
    expect(problem).toMatchObject({ code: 'not-allowed-now' })
    expect(problem.detail).toContain('You are not authorised to measure by')
  })

  it('refuses a form that is older than the batch, and a batch submitted already', async () => {
    const { batch, analyst } = await aRun(at())
    const agent = await at().as(analyst)
    const stale = await agent.refused(submitBatch, {
      params: { id: batch.id },
      body: { version: batch.version - 1 },
    })
    expect(stale).toMatchObject({ code: 'stale', conflict: { changedBy: analyst.name } })
    const submitted = await agent.call(submitBatch, {
      params: { id: batch.id },
      body: { version: batch.version },
    })
    const again = await agent.refused(submitBatch, {
      params: { id: batch.id },
      body: { version: submitted.version },
    })
    expect(again).toMatchObject({ code: 'not-allowed-now' })
    expect(again.detail).toContain('This batch is submitted for review')
  })

  it('two people at once: one submits, the other is told', async () => {
    const { batch, analyst } = await aRun(at())
    const other = await anAnalyst(database(), { name: 'Bo Vial' })
    const input = { params: { id: batch.id }, body: { version: batch.version } }
    const [a, b] = await Promise.all([at().as(analyst), at().as(other)])
    const problem = oneWins(await Promise.all([a.send(submitBatch, input), b.send(submitBatch, input)]))
    expect(problem.code).toBe('stale')
    expect(await storedResults(at(), batch.id)).toHaveLength(1)
  })
})
