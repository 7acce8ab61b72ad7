import { getStory, saveReadings, submitBatch } from '@weirlight/shared/contracts'
import { ENGINE_VERSION } from '@weirlight/shared/assay'
import { sql } from 'kysely'
import { describe, expect, it } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import { aLot } from '../../testing/builders/bench.builders.js'
import { aReleasedResult, aRun, theBench } from '../../testing/builders/results.builders.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { ResultsModule } from './index.js'

// Absorbances and what they come to are constructed.
const at = useTestApp({ imports: [ResultsModule] })
const story = async (id: string) =>
  (await at().as((await theBench(at())).reviewer)).call(getStory, { params: { id } })

/** The owner alone can rewrite what was released. */
async function rewrite(id: string, changes: { concentration?: number; engineVersion?: string }) {
  await at().database.owner.transaction(SYSTEM, 'test.forge', null, async (trx) => {
    await sql`alter table results disable trigger b_keep_settled`.execute(trx)
    await trx.updateTable('results').set(changes).where('id', '=', id).execute()
    await sql`alter table results enable trigger b_keep_settled`.execute(trx)
  })
}

describe('the story of a number', () => {
  it('recomputes it to the same double, and names everything behind it', async () => {
    const { result, batch } = await aReleasedResult(at())
    const { analyst, reviewer } = await theBench(at())
    const told = await story(result.id)
    expect(Object.is(told.stored, told.recomputed)).toBe(true)
    expect(told).toMatchObject({ same: true, engineVersion: ENGINE_VERSION, changes: [] })
    expect(told.result).toEqual(result)
    expect(told.readings.map(({ absorbance, by, superseded }) => [absorbance, by, superseded])).toEqual([
      ['0.0500', analyst.name, false],
      ['0.0503', analyst.name, false],
    ])
    expect(told.calibration).toMatchObject({ number: batch.calibrationNumber, signedBy: reviewer.name })
    expect(told.calibration.equation).toMatch(/^A = -?\d.* [+−] 0\.19\d+ c$/)
    expect(told.standards).toHaveLength(8)
    expect(told.lines.map(({ heading }) => heading)).toEqual([
      'Reported',
      'Computed',
      'From the curve',
      'Read',
      'Blank and dilution',
      'Standards',
      'Sample',
      'Between the reading and you',
    ])
    const text = told.lines.map(({ main, detail }) => `${main} ${detail}`).join('\n')
    for (const part of [
      `${result.text} µg/L iron, total`,
      '200 µg/L',
      'A 0.0500, 0.0503 at 510 nm',
      'method blank A 0.0005, 0.0002; not subtracted',
      'wavelength check',
      'found 536.5 for 536.4 nm',
      result.sampleNumber,
      'collected',
      'nothing was changed by hand',
      `submitted by ${analyst.name}`,
      `reviewed and released by ${reviewer.name}`,
    ]) {
      expect(text).toContain(part)
    }
    expect(told.tint?.absorbance).toBeCloseTo(0.05015, 10)
    expect(told.caution).toContain('not a determination of compliance')
  })

  it('shows what was read first, what it became, by whom and why', async () => {
    const { batch, analyst } = await aRun(at())
    const agent = await at().as(analyst)
    const row = batch.rows.find(({ kind }) => kind === 'sample')
    const first = row?.readings[0]
    const corrected = await agent.call(saveReadings, {
      params: { id: batch.id },
      body: {
        source: 'typed',
        readings: [
          {
            positionId: row?.id ?? '',
            replicate: 1,
            absorbance: '0.0499',
            supersedes: first?.id ?? null,
            reason: 'Read off the wrong line',
          },
        ],
      },
    })
    const submitted = await agent.call(submitBatch, {
      params: { id: batch.id },
      body: { version: corrected.version },
    })
    const told = await story(submitted.rows.find(({ kind }) => kind === 'sample')?.resultId ?? '')
    expect(
      told.readings.map(({ absorbance, superseded, reason }) => [absorbance, superseded, reason]),
    ).toEqual([
      ['0.0500', true, ''],
      ['0.0499', false, 'Read off the wrong line'],
      ['0.0503', false, ''],
    ])
    expect(told.changes).toEqual([
      expect.objectContaining({
        what: 'reading 1',
        from: '0.0500',
        to: '0.0499',
        by: analyst.name,
        reason: 'Read off the wrong line',
      }),
    ])
    expect(told.same).toBe(true)
    expect(told.result.releasedAt).toBeNull()
  })

  it('follows its lots back to the certificate of the stock', async () => {
    const { db } = at().database
    const bench = await theBench(at())
    const stock = await aLot(at().database, { kind: 'stock' })
    await db.transaction(SYSTEM, 'material.change', null, async (trx) => {
      await trx
        .updateTable('materialLots')
        .set({ certificateRef: 'CRM-77-Fe' })
        .where('id', '=', stock.id)
        .execute()
      // the bench's stock solution was made from it
      const { stockLotId } = await trx
        .selectFrom('calibrations')
        .select('stockLotId')
        .where('id', '=', bench.calibrationId)
        .executeTakeFirstOrThrow()
      await trx
        .updateTable('materialLots')
        .set({ parentId: stock.id })
        .where('id', '=', stockLotId ?? '')
        .execute()
    })
    const { result } = await aReleasedResult(at())
    const told = await story(result.id)
    const roles = new Set(told.lots.map(({ role }) => role))
    expect([...roles].sort()).toEqual(['control', 'reagent', 'standard'])
    const root = told.lots.find(({ id }) => id === stock.id)
    expect(root?.detail).toContain('certificate CRM-77-Fe, Example Standards')
    expect(told.lots.some(({ detail }) => detail.includes(`made from ${stock.number}`))).toBe(true)
    expect(told.lines.find(({ heading }) => heading === 'Standards')?.detail).toContain(
      'certificate CRM-77-Fe',
    )
  })

  it('says aloud that a stored number is not what its readings come to', async () => {
    const { result } = await aReleasedResult(at())
    await rewrite(result.id, { concentration: result.concentration + 1e-9 })
    const told = await story(result.id)
    expect(told.same).toBe(false)
    expect(told.recomputed).toBe(result.concentration)
    expect(told.lines.find(({ heading }) => heading === 'Computed')?.detail).toContain('DIFFERENT')
  })

  it('of a number from another major version of the engine says that a difference is not a fault', async () => {
    const { result } = await aReleasedResult(at())
    await rewrite(result.id, { concentration: result.concentration + 1e-9, engineVersion: '0.9.3' })
    const told = await story(result.id)
    expect(told.engineVersion).toBe(`0.9.3, recomputed by ${ENGINE_VERSION}`)
    expect(told.same).toBe(false)
    const detail = told.lines.find(({ heading }) => heading === 'Computed')?.detail
    expect(detail).toContain('engine 0.9.3 is another major version, whose numbers may differ')
    expect(detail).not.toContain('DIFFERENT')
  })

  it('is for the record’s readers, and a number that is not there is not found', async () => {
    const { result } = await aReleasedResult(at())
    const client = await at().as(await aUser(at().database.db, { role: 'client' }))
    expect((await client.refused(getStory, { params: { id: result.id } })).code).toBe('forbidden')
    const auditor = await at().as(await aUser(at().database.db, { role: 'auditor' }))
    expect((await auditor.refused(getStory, { params: { id: '999999' } })).code).toBe('not-found')
  })
})
