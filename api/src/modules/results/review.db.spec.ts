import {
  changePosition,
  getBatch,
  getSample,
  recordFindingAction,
  releaseBatch,
  returnBatch,
  saveReadings,
  submitBatch,
  type BatchView,
} from '@weirlight/shared/contracts'
import type { Problem } from '@weirlight/shared/errors'
import type { Actor } from '@weirlight/shared/permissions'
import { assessPosition } from '@weirlight/shared/worksheet'
import { sql } from 'kysely'
import { describe, expect, it } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import { aBatchForm } from '../../testing/builders/batches.builders.js'
import { anAnalyst, aSigner, authorise, PASSPHRASE } from '../../testing/builders/bench.builders.js'
import {
  ABOVE,
  aReleasedBatch,
  aRun,
  aSecondCalibration,
  aSubmittedBatch,
  BELOW,
  runReadings,
  theBench,
} from '../../testing/builders/results.builders.js'
import { anAcceptedSample, aPoint } from '../../testing/builders/samples.builders.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { OpeningService } from '../batches/index.js'
import { ResultsModule } from './index.js'

// Expected values are constructed where nothing else is said; the line is that of the calibration's builder.
const at = useTestApp({ imports: [ResultsModule] })
const database = () => at().database
const results = (batchId: string) =>
  database().db.fresh.selectFrom('results').selectAll().where('batchId', '=', batchId).orderBy('id').execute()
const determinationStatesOf = async (sampleIds: readonly string[]) =>
  (
    await database()
      .db.fresh.selectFrom('determinations')
      .select('state')
      .where('sampleId', 'in', [...sampleIds])
      .orderBy('id')
      .execute()
  ).map(({ state }) => state)
const as = (actor: Actor) => at().as(actor)
const release = (batch: BatchView, changes: { rerunPositionIds?: string[]; passphrase?: string } = {}) => ({
  params: { id: batch.id },
  body: { version: batch.version, passphrase: PASSPHRASE, ...changes },
})
const samplesOf = (batch: BatchView) => batch.rows.filter((row) => row.kind === 'sample')
/** One answer is good and one is refused with a sentence that says why. */
function oneWins(sent: { status: number; json: unknown }[]): Problem {
  expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
  return sent.find(({ status }) => status === 409)?.json as Problem
}

describe('submitting', () => {
  it('stores for each sample the very doubles the engine gives, with everything it was given', async () => {
    const { batch, analyst } = await aRun(at(), { samples: [ABOVE, BELOW] })
    const submitted = await (
      await as(analyst)
    ).call(submitBatch, {
      params: { id: batch.id },
      body: { version: batch.version },
    })
    expect(submitted.state).toBe('submitted')
    expect(submitted.submittedAt).not.toBeNull()
    const stored = await results(batch.id)
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
    expect(await determinationStatesOf(samplesOf(batch).map((row) => row.sampleId ?? ''))).toEqual([
      'measured',
      'measured',
    ])
  })

  it('refuses a run that is not fully read, and says which position', async () => {
    const bench = await theBench(at())
    const opened = await at()
      .get(OpeningService)
      .openBatch(bench.analyst, await aBatchForm(at(), { ...bench, sampleCount: 1 }))
    const agent = await as(bench.analyst)
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
    expect(await results(opened.id)).toEqual([])
  })

  it('refuses a failed check in silence, and takes it once something was said; the results carry the flag', async () => {
    // 0.30 A for 2 mg/L is a recovery of about 76 %
    const { batch, analyst } = await aRun(at(), { controls: { verification: ['0.3000', '0.3002'] } })
    const agent = await as(analyst)
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
    expect((await results(batch.id))[0]?.flags).toContain('quality-control-failed')
  })

  it('is for those authorised to measure by the method', async () => {
    const { batch } = await aRun(at())
    const problem = await (
      await as(await aUser(database().db))
    ).refused(submitBatch, {
      params: { id: batch.id },
      body: { version: batch.version },
    })
    expect(problem).toMatchObject({ code: 'not-allowed-now' })
    expect(problem.detail).toContain('You are not authorised to measure by')
  })

  it('refuses a form that is older than the batch, and a batch submitted already', async () => {
    const { batch, analyst } = await aRun(at())
    const agent = await as(analyst)
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
    const [a, b] = await Promise.all([as(analyst), as(other)])
    const problem = oneWins(await Promise.all([a.send(submitBatch, input), b.send(submitBatch, input)]))
    expect(problem.code).toBe('stale')
    expect(await results(batch.id)).toHaveLength(1)
  })
})

describe('sending back', () => {
  it('keeps the reason, opens the bench again, and a second submission replaces the values', async () => {
    const { batch, analyst } = await aSubmittedBatch(at(), { samples: [ABOVE] })
    const { reviewer } = await theBench(at())
    const [first] = await results(batch.id)
    const returned = await (
      await as(reviewer)
    ).call(returnBatch, {
      params: { id: batch.id },
      body: { version: batch.version, reason: 'Read position 5 once more' },
    })
    expect(returned).toMatchObject({ state: 'returned', returnedReason: 'Read position 5 once more' })
    const sampleIds = samplesOf(batch).map((row) => row.sampleId ?? '')
    expect(await determinationStatesOf(sampleIds)).toEqual(['in-batch'])
    const agent = await as(analyst)
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
    const [second, ...more] = await results(batch.id)
    expect(more).toEqual([])
    expect(second?.id).toBe(first?.id)
    expect([first?.verdict, second?.verdict]).toEqual(['above', 'below'])
    expect(second?.measuredAt.getTime()).toBeGreaterThan(first?.measuredAt.getTime() ?? 0)
    expect(await determinationStatesOf(sampleIds)).toEqual(['measured'])
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
    const agent = await as(reviewer)
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
    const [a, b] = await Promise.all([as(reviewer), as(other)])
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
    const after = await (await as(reviewer)).call(getBatch, { params: { id: two.id } })
    const states = (await results(two.id)).map(({ state }) => state)
    expect([after.state, states]).toEqual(
      after.state === 'released' ? ['released', ['released']] : ['returned', ['measured']],
    )
  })
})

describe('releasing', () => {
  it('signs every number, and moves results, determinations and samples', async () => {
    const { batch, reviewer } = await aReleasedBatch(at(), {
      samples: [ABOVE, BELOW],
      comment: 'Checked against the run sheet',
    })
    expect(batch.state).toBe('released')
    expect(
      batch.signatures.map(({ meaning, printedName, stands }) => [meaning, printedName, stands]),
    ).toEqual([
      ['reviewed', reviewer.name, true],
      ['released', reviewer.name, true],
    ])
    const stored = await results(batch.id)
    expect(stored.map(({ state, releasedBy }) => [state, releasedBy])).toEqual([
      ['released', reviewer.userId],
      ['released', reviewer.userId],
    ])
    const sampleIds = samplesOf(batch).map((row) => row.sampleId ?? '')
    expect(await determinationStatesOf(sampleIds)).toEqual(['released', 'released'])
    const sample = await (await as(reviewer)).call(getSample, { params: { id: sampleIds[0] ?? '' } })
    expect(sample.state).toBe('reported')
    const entry = await database()
      .db.read.selectFrom('history')
      .select(['actorName', 'reason'])
      .where('action', '=', 'batch.release')
      .where('thing', '=', 'batches')
      .where('thingId', '=', batch.id)
      .executeTakeFirstOrThrow()
    expect(entry).toEqual({ actorName: reviewer.name, reason: 'Checked against the run sheet' })
  })

  it('says on the field that the passphrase is wrong, and signs nothing', async () => {
    const { batch } = await aSubmittedBatch(at())
    const { reviewer } = await theBench(at())
    const problem = await (
      await as(reviewer)
    ).refused(releaseBatch, release(batch, { passphrase: 'not the right one at all' }))
    expect(problem).toMatchObject({ code: 'wrong-passphrase', errors: [{ path: 'passphrase' }] })
    const view = await (await as(reviewer)).call(getBatch, { params: { id: batch.id } })
    expect([view.state, view.signatures]).toEqual(['submitted', []])
  })

  it('is refused to whoever submitted it, entered a reading, explained a finding or changed a dilution', async () => {
    const hand = async () => {
      const actor = await aSigner(database())
      await authorise(database(), actor, { methodCode: 'fe-phenanthroline', activity: 'read' })
      return actor
    }
    const { analyst } = await theBench(at())
    const submit = async (batch: BatchView) =>
      (await as(analyst)).call(submitBatch, { params: { id: batch.id }, body: { version: batch.version } })
    const submitter = await hand()
    const own = await aSubmittedBatch(at(), { analyst: submitter })

    const reader = await hand()
    const read = await aRun(at())
    const [row] = samplesOf(read.batch)
    const withReading = await submit(
      await (
        await as(reader)
      ).call(saveReadings, {
        params: { id: read.batch.id },
        body: {
          source: 'typed',
          readings: [
            {
              positionId: row?.id ?? '',
              replicate: 1,
              absorbance: '0.0501',
              reason: 'Misread before',
              supersedes: row?.readings[0]?.id ?? null,
            },
          ],
        },
      }),
    )

    const explainer = await hand()
    const failed = await aRun(at(), { controls: { verification: ['0.3000', '0.3002'] } })
    let explained = failed.batch
    for (const finding of failed.batch.findingsList) {
      explained = await (
        await as(explainer)
      ).call(recordFindingAction, {
        params: { id: failed.batch.id },
        body: { findingId: finding.id, kind: 'explained', text: 'An old standard was used' },
      })
    }
    const withWord = await submit(explained)

    const diluter = await hand()
    const plain = await aRun(at())
    const diluted: BatchView[] = []
    for (const row of plain.batch.rows.filter(({ kind }) => kind === 'sample' || kind === 'duplicate')) {
      const body = { version: row.version, dilution: '2', note: '', reason: 'It was diluted by two' }
      diluted.push(await (await as(diluter)).call(changePosition, { params: { id: row.id }, body }))
    }
    const withDilution = await submit(diluted.at(-1) ?? plain.batch)

    for (const [actor, batch] of [
      [submitter, own.batch],
      [reader, withReading],
      [explainer, withWord],
      [diluter, withDilution],
    ] as const) {
      const problem = await (await as(actor)).refused(releaseBatch, release(batch))
      expect(problem.code).toBe('own-work')
    }
  })

  it('is for those authorised to review the method', async () => {
    const { batch } = await aSubmittedBatch(at())
    const stranger = await aSigner(database(), { methodCode: 'cu-bathocuproine' })
    const problem = await (await as(stranger)).refused(releaseBatch, release(batch))
    expect(problem.code).toBe('not-allowed-now')
    expect(problem.detail).toContain('You are not authorised to review results of')
  })

  it('keeps what is to be measured again, unreported, and lets the determination wait for another batch', async () => {
    const submitted = await aSubmittedBatch(at(), { samples: [ABOVE, BELOW] })
    const { reviewer } = await theBench(at())
    const [first, second] = samplesOf(submitted.batch)
    const agent = await as(reviewer)
    const foreign = await agent.refused(
      releaseBatch,
      release(submitted.batch, { rerunPositionIds: [submitted.batch.rows[0]?.id ?? ''] }),
    )
    expect(foreign.errors?.[0]?.path).toBe('rerunPositionIds.0')
    await agent.call(releaseBatch, release(submitted.batch, { rerunPositionIds: [first?.id ?? ''] }))
    expect((await results(submitted.batch.id)).map(({ state }) => state)).toEqual([
      'not-reported',
      'released',
    ])
    const sampleIds = [first?.sampleId ?? '', second?.sampleId ?? '']
    expect(await determinationStatesOf(sampleIds)).toEqual(['requested', 'released'])
    expect((await agent.call(getSample, { params: { id: sampleIds[0] ?? '' } })).state).toBe('in-analysis')
    // a later batch takes it up, and both measurements are there
    const again = await aReleasedBatch(at(), {
      determinationIds: [first?.determinationId ?? ''],
      samples: [BELOW],
    })
    expect((await results(again.batch.id)).map(({ state }) => state)).toEqual(['released'])
    const all = await database()
      .db.read.selectFrom('results')
      .select('state')
      .where('determinationId', '=', first?.determinationId ?? '')
      .orderBy('id')
      .execute()
    expect(all.map(({ state }) => state)).toEqual(['not-reported', 'released'])
    expect((await agent.call(getSample, { params: { id: sampleIds[0] ?? '' } })).state).toBe('reported')
  })

  it('refuses an older form, and a batch that is released already', async () => {
    const { batch } = await aSubmittedBatch(at())
    const { reviewer } = await theBench(at())
    const agent = await as(reviewer)
    const stale = await agent.refused(releaseBatch, {
      ...release(batch),
      body: { ...release(batch).body, version: batch.version - 1 },
    })
    expect(stale.code).toBe('stale')
    const released = await agent.call(releaseBatch, release(batch))
    const again = await agent.refused(releaseBatch, release(released))
    expect(again.code).toBe('not-allowed-now')
    expect(again.detail).toContain('This batch is released')
  })

  it('two people at once: one releases, and the batch is signed once', async () => {
    const { batch } = await aSubmittedBatch(at())
    const { reviewer } = await theBench(at())
    const other = await aSigner(database(), { name: 'Rhea Two' })
    const [a, b] = await Promise.all([as(reviewer), as(other)])
    const problem = oneWins(
      await Promise.all([a.send(releaseBatch, release(batch)), b.send(releaseBatch, release(batch))]),
    )
    expect(problem.code).toBe('stale')
    const signatures = await database()
      .db.read.selectFrom('signatures')
      .select('meaning')
      .where('thing', '=', 'batches')
      .where('thingId', '=', batch.id)
      .execute()
    expect(signatures).toHaveLength(2)
  })

  it('of two batches with one sample at the same moment: the sample is reported all the same', async () => {
    const point = await aPoint(database())
    const sample = await anAcceptedSample(at(), {
      clientId: point.clientId,
      pointId: point.id,
      methodCodes: ['fe-phenanthroline', 'cu-bathocuproine'],
    })
    const [iron, copper] = sample.details
    const bench = await theBench(at())
    const one = (await aSubmittedBatch(at(), { determinationIds: [iron?.id ?? ''] })).batch
    const calibrationId = await aSecondCalibration(at())
    const other = (await aSubmittedBatch(at(), { calibrationId })).batch
    // the second determination is put into that other run as if by its own method: the lock order is what matters here
    await database().owner.transaction(SYSTEM, 'test.move', null, async (trx) => {
      await trx
        .updateTable('results')
        .set({ sampleId: sample.id, determinationId: copper?.id ?? '' })
        .where('batchId', '=', other.id)
        .execute()
      await trx
        .updateTable('determinations')
        .set({ state: 'measured' })
        .where('id', '=', copper?.id ?? '')
        .execute()
    })
    const second = await aSigner(database())
    const [a, b] = await Promise.all([as(bench.reviewer), as(second)])
    const sent = await Promise.all([a.send(releaseBatch, release(one)), b.send(releaseBatch, release(other))])
    expect(sent.map(({ status }) => status)).toEqual([200, 200])
    const after = await a.call(getSample, { params: { id: sample.id } })
    expect(after.state).toBe('reported')
  })
})

describe('what was released', () => {
  it('cannot be changed by the application, and its signature no longer stands when the owner does', async () => {
    const { batch, reviewer } = await aReleasedBatch(at())
    const [result] = await results(batch.id)
    await expect(
      database().db.transaction(reviewer, 'test.forge', null, (trx) =>
        trx
          .updateTable('results')
          .set({ reportedText: '12' })
          .where('id', '=', result?.id ?? '')
          .execute(),
      ),
    ).rejects.toThrow('kept as it was signed')
    await database().owner.transaction(SYSTEM, 'test.forge', null, async (trx) => {
      await sql`alter table results disable trigger b_keep_settled`.execute(trx)
      await trx
        .updateTable('results')
        .set({ reportedText: '12' })
        .where('id', '=', result?.id ?? '')
        .execute()
      await sql`alter table results enable trigger b_keep_settled`.execute(trx)
    })
    const view = await (await as(reviewer)).call(getBatch, { params: { id: batch.id } })
    expect(view.signatures.map(({ stands }) => stands)).toEqual([false, false])
  })
})
