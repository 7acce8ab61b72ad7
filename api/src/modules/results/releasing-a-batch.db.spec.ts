import {
  changePosition,
  getBatch,
  getSample,
  recordFindingAction,
  releaseBatch,
  saveReadings,
  submitBatch,
  type BatchView,
} from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import { describe, expect, it } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import { aSigner, authorise } from '../../testing/builders/bench.builders.js'
import {
  ABOVE,
  aReleasedBatch,
  aRun,
  aSecondCalibration,
  aSubmittedBatch,
  BELOW,
  theBench,
} from '../../testing/builders/results.builders.js'
import { anAcceptedSample, aPoint } from '../../testing/builders/samples.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { useTestApp } from '../../testing/test-app.js'
import { ResultsModule } from './index.js'
import { determinationStatesOf, release, samplesOf, storedResults } from './review.test-support.js'

// Expected values are constructed where nothing else is said; the line is that of the calibration's builder.
const at = useTestApp({ imports: [ResultsModule] })
const database = () => at().database

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
    const stored = await storedResults(at(), batch.id)
    expect(stored.map(({ state, releasedBy }) => [state, releasedBy])).toEqual([
      ['released', reviewer.userId],
      ['released', reviewer.userId],
    ])
    const sampleIds = samplesOf(batch).map((row) => row.sampleId ?? '')
    expect(await determinationStatesOf(at(), sampleIds)).toEqual(['released', 'released'])
    const sample = await (await at().as(reviewer)).call(getSample, { params: { id: sampleIds[0] ?? '' } })
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
      await at().as(reviewer)
    ).refused(releaseBatch, release(batch, { passphrase: 'not the right one at all' }))
    expect(problem).toMatchObject({ code: 'wrong-passphrase', errors: [{ path: 'passphrase' }] })
    const view = await (await at().as(reviewer)).call(getBatch, { params: { id: batch.id } })
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
      (await at().as(analyst)).call(submitBatch, {
        params: { id: batch.id },
        body: { version: batch.version },
      })
    const submitter = await hand()
    const own = await aSubmittedBatch(at(), { analyst: submitter })

    const reader = await hand()
    const read = await aRun(at())
    const [row] = samplesOf(read.batch)
    const withReading = await submit(
      await (
        await at().as(reader)
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
        await at().as(explainer)
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
      diluted.push(await (await at().as(diluter)).call(changePosition, { params: { id: row.id }, body }))
    }
    const withDilution = await submit(diluted.at(-1) ?? plain.batch)

    for (const [actor, batch] of [
      [submitter, own.batch],
      [reader, withReading],
      [explainer, withWord],
      [diluter, withDilution],
    ] as const) {
      const problem = await (await at().as(actor)).refused(releaseBatch, release(batch))
      expect(problem.code).toBe('own-work')
    }
  })

  it('is for those authorised to review the method', async () => {
    const { batch } = await aSubmittedBatch(at())
    const stranger = await aSigner(database(), { methodCode: 'cu-bathocuproine' })
    const problem = await (await at().as(stranger)).refused(releaseBatch, release(batch))
    expect(problem.code).toBe('not-allowed-now')
    expect(problem.detail).toContain('You are not authorised to review results of')
  })

  it('keeps what is to be measured again, unreported, and lets the determination wait for another batch', async () => {
    const submitted = await aSubmittedBatch(at(), { samples: [ABOVE, BELOW] })
    const { reviewer } = await theBench(at())
    const [first, second] = samplesOf(submitted.batch)
    const agent = await at().as(reviewer)
    const foreign = await agent.refused(
      releaseBatch,
      release(submitted.batch, { rerunPositionIds: [submitted.batch.rows[0]?.id ?? ''] }),
    )
    expect(foreign.errors?.[0]?.path).toBe('rerunPositionIds.0')
    await agent.call(releaseBatch, release(submitted.batch, { rerunPositionIds: [first?.id ?? ''] }))
    expect((await storedResults(at(), submitted.batch.id)).map(({ state }) => state)).toEqual([
      'not-reported',
      'released',
    ])
    const sampleIds = [first?.sampleId ?? '', second?.sampleId ?? '']
    expect(await determinationStatesOf(at(), sampleIds)).toEqual(['requested', 'released'])
    expect((await agent.call(getSample, { params: { id: sampleIds[0] ?? '' } })).state).toBe('in-analysis')
    // a later batch takes it up, and both measurements are there
    const again = await aReleasedBatch(at(), {
      determinationIds: [first?.determinationId ?? ''],
      samples: [BELOW],
    })
    expect((await storedResults(at(), again.batch.id)).map(({ state }) => state)).toEqual(['released'])
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
    const agent = await at().as(reviewer)
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
    const [a, b] = await Promise.all([at().as(reviewer), at().as(other)])
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
    const [a, b] = await Promise.all([at().as(bench.reviewer), at().as(second)])
    const sent = await Promise.all([a.send(releaseBatch, release(one)), b.send(releaseBatch, release(other))])
    expect(sent.map(({ status }) => status)).toEqual([200, 200])
    const after = await a.call(getSample, { params: { id: sample.id } })
    expect(after.state).toBe('reported')
  })
})

describe('what was released', () => {
  it('cannot be changed by the application, and its signature no longer stands when the owner does', async () => {
    const { batch, reviewer } = await aReleasedBatch(at())
    const [result] = await storedResults(at(), batch.id)
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
    const view = await (await at().as(reviewer)).call(getBatch, { params: { id: batch.id } })
    expect(view.signatures.map(({ stands }) => stands)).toEqual([false, false])
  })
})
