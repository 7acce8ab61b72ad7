import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import {
  applyReadings,
  getBatch,
  previewReadings,
  runSheetFile,
  saveReadings,
  type readingsPreview,
} from '@weirlight/shared/contracts'
import type { Problem } from '@weirlight/shared/errors'
import { describe, expect, it } from 'vitest'
import type { z } from 'zod'
import { anOpenBatch, aReadBatch } from '../../testing/builders/batches.builders.js'
import { anAnalyst } from '../../testing/builders/bench.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { aUser } from '../../testing/people.js'
import type { Agent } from '../../testing/agent.js'
import { useTestApp } from '../../testing/test-app.js'
import { BatchesModule } from './index.js'

// The files of fixtures/import are constructed for a run of three samples, each position read twice.
const FILES = fileURLToPath(new URL('../../../../fixtures/import/', import.meta.url))
const at = useTestApp({ imports: [BatchesModule] })
const bytes = (name: string) => readFileSync(`${FILES}${name}`)

async function preview(agent: Agent, id: string, name: string, content: Buffer = bytes(name)) {
  const sent = await agent.upload(previewReadings, {
    params: { id },
    file: { filename: name.split('/').at(-1) ?? '', content },
  })
  if (sent.status !== 200) throw new Error(JSON.stringify(sent.json))
  return sent.json as z.infer<typeof readingsPreview>
}

describe('readings by file', () => {
  it.each(['ok/readings-iron-run.csv', 'ok/readings-iron-run.xlsx'])(
    '%s is shown, entered whole, once',
    async (name) => {
      const { batch, analyst } = await anOpenBatch(at())
      const agent = await at().as(analyst)
      const shown = await preview(agent, batch.id, name)
      expect(shown).toMatchObject({ good: 10, bad: 0 })
      expect(shown.rows[4]).toMatchObject({ position: '5', label: batch.rows[4]?.label, current: ['', ''] })
      expect((await agent.call(getBatch, { params: { id: batch.id } })).read).toBe(0)

      const other = await at().as(await anAnalyst(at().database))
      const input = { params: { id: batch.id, uploadId: shown.uploadId }, body: {} }
      const sent = await Promise.all([agent.send(applyReadings, input), other.send(applyReadings, input)])
      oneWins(sent)
      const view = await agent.call(getBatch, { params: { id: batch.id } })
      expect(view.read).toBe(10)
      expect(view.rows[4]?.readings[0]).toMatchObject({ source: 'file', corrected: false })
      expect((await agent.refused(applyReadings, input)).detail).toContain('entered already')
      const kept = await at()
        .database.db.read.selectFrom('uploads')
        .select(['bytes', 'sha256'])
        .where('id', '=', shown.uploadId)
        .executeTakeFirstOrThrow()
      expect(kept.bytes.equals(bytes(name))).toBe(true)
    },
  )

  it('the run sheet goes out, is filled in elsewhere, and loads again', async () => {
    const { batch, analyst } = await aReadBatch(at())
    const agent = await at().as(analyst)
    const { bytes: workbook, headers } = await agent.file(runSheetFile, { params: { id: batch.id } })
    expect(String(headers['content-disposition'])).toContain(`run-sheet-${batch.number}.xlsx`)
    const shown = await preview(agent, batch.id, 'run-sheet.xlsx', workbook)
    expect(shown).toMatchObject({ good: batch.positions, bad: 0 })
    const same = await agent.call(applyReadings, {
      params: { id: batch.id, uploadId: shown.uploadId },
      body: {},
    })
    expect(same.corrections).toEqual([])
    expect(same.version).toBe(batch.version)
  })

  it('what would replace a reading needs a reason', async () => {
    const { batch, analyst } = await aReadBatch(at(), { samples: [['0.0600', '0.0601']] })
    const agent = await at().as(analyst)
    const shown = await preview(agent, batch.id, 'ok/readings-iron-run.csv')
    const params = { id: batch.id, uploadId: shown.uploadId }
    const refused = await agent.refused(applyReadings, { params, body: {} })
    expect(refused.errors?.[0]?.message).toContain('why the reading is corrected')
    const view = await agent.call(applyReadings, { params, body: { reason: 'Typed from the wrong sheet' } })
    expect(view.corrections.length).toBeGreaterThan(2)
    expect(view.corrections[0]).toMatchObject({
      what: 'Position 5, reading 1',
      reason: 'Typed from the wrong sheet',
    })
  })

  it('a cell that somebody filled after the preview stops all of it', async () => {
    const { batch, analyst } = await anOpenBatch(at())
    const agent = await at().as(analyst)
    const shown = await preview(agent, batch.id, 'ok/readings-iron-run.csv')
    const other = await anAnalyst(at().database, { name: 'Ben Sluice' })
    await (
      await at().as(other)
    ).call(saveReadings, {
      params: { id: batch.id },
      body: {
        source: 'typed',
        readings: [
          { positionId: batch.rows[5]?.id ?? '', replicate: 1, absorbance: '0.2', supersedes: null },
        ],
      },
    })
    const refused = await agent.refused(applyReadings, {
      params: { id: batch.id, uploadId: shown.uploadId },
      body: { reason: 'x y z' },
    })
    expect(refused).toMatchObject({ code: 'stale', conflict: { changedBy: 'Ben Sluice' } })
    expect(refused.detail).toContain('Position 6, reading 1')
    expect(
      (await agent.call(getBatch, { params: { id: batch.id } })).rows.flatMap((row) => row.readings),
    ).toHaveLength(1)
  })

  it.each([
    ['not-ok/readings-decimal-comma.csv', 0, 2],
    ['not-ok/readings-bad-rows.csv', 1, 8],
    ['not-ok/readings-unknown-columns.csv', 1, 1],
    ['not-ok/readings-missing-columns.csv', 0, 1],
  ])('%s shows what is wrong and enters nothing', async (name, good, bad) => {
    const { batch, analyst } = await anOpenBatch(at())
    const agent = await at().as(analyst)
    const shown = await preview(agent, batch.id, name)
    expect([shown.good, shown.bad]).toEqual([good, bad])
    const refused = await agent.refused(applyReadings, {
      params: { id: batch.id, uploadId: shown.uploadId },
      body: {},
    })
    expect(refused.code).toBe('not-allowed-now')
    expect(
      (await agent.call(getBatch, { params: { id: batch.id } })).rows.flatMap((row) => row.readings),
    ).toEqual([])
  })

  it('a file of another batch, an unreadable one, a reader without the bench', async () => {
    const { batch, analyst } = await anOpenBatch(at())
    const { batch: elsewhere } = await anOpenBatch(at(), { sampleCount: 1 })
    const agent = await at().as(analyst)
    const shown = await preview(agent, batch.id, 'ok/readings-iron-run.csv')
    const refused = await agent.refused(applyReadings, {
      params: { id: elsewhere.id, uploadId: shown.uploadId },
      body: {},
    })
    expect(refused.code).toBe('not-found')
    const unreadable = await agent.upload(previewReadings, {
      params: { id: batch.id },
      file: { filename: 'readings.csv', content: Buffer.from([0xff, 0xfe, 0x00, 0x01, 0x02]) },
    })
    expect((unreadable.json as Problem).code).toBe('upload-unreadable')
    const auditor = await at().as(await aUser(at().database.db, { role: 'auditor' }))
    const forbidden = await auditor.upload(previewReadings, {
      params: { id: batch.id },
      file: { filename: 'a.csv', content: bytes('ok/readings-iron-run.csv') },
    })
    expect((forbidden.json as Problem).code).toBe('forbidden')
    expect((await auditor.file(runSheetFile, { params: { id: batch.id } })).bytes.length).toBeGreaterThan(
      1000,
    )
  })
})
