import { createHash } from 'node:crypto'
import {
  getBatch,
  getControlChart,
  listValidationRuns,
  recordFindingAction,
  runValidation,
  submitBatch,
  validationJson,
  validationPdf,
  type BatchView,
} from '@weirlight/shared/contracts'
import { ENGINE_VERSION, individualsChart, type ValidationReport } from '@weirlight/shared/assay'
import { beforeAll, describe, expect, it } from 'vitest'
import { JobsService } from '../../platform/index.js'
import type { Agent } from '../../testing/agent.js'
import {
  aRun,
  aSecondCalibration,
  aSubmittedBatch,
  theBench,
} from '../../testing/builders/results.builders.js'
import { packed, pdfPages } from '../../testing/pdf-text.js'
import { useTestApp } from '../../testing/test-app.js'
import { ResultsModule } from '../results/index.js'
import { renderValidation } from './jobs/validation.jobs.js'
import { QualityModule } from './index.js'

// Absorbances and what they come to are constructed.
const at = useTestApp({ imports: [ResultsModule, QualityModule] })
let agent: Agent
beforeAll(async () => {
  agent = await at().as((await theBench(at())).reviewer)
})

describe('a control chart', () => {
  let methodId: string
  const batches: BatchView[] = []
  const chart = (kind: 'verification' | 'control' | 'method-blank' | 'duplicate' | 'slope') =>
    agent.call(getControlChart, { query: { methodId, kind } })
  /** what the run sheets themselves say, in the order they were read */
  const shown = (kind: string) =>
    batches.flatMap((batch) =>
      batch.rows.filter((row) => row.kind === kind).map((row) => row.assessment.qcValue),
    )

  beforeAll(async () => {
    const bench = await theBench(at())
    methodId = bench.methodId
    for (const control of [
      ['0.1971', '0.1969'],
      ['0.1980', '0.1978'],
      ['0.1962', '0.1964'],
    ] as const) {
      const { batch } = await aSubmittedBatch(at(), { controls: { control } })
      batches.push(batch)
    }
    // far off, explained, submitted: it stays on the chart
    const { batch, analyst } = await aRun(at(), { controls: { control: ['0.1500', '0.1502'] } })
    const technician = await at().as(analyst)
    let last = batch
    for (const finding of batch.findingsList.filter(({ severity }) => severity === 'failed')) {
      last = await technician.call(recordFindingAction, {
        params: { id: batch.id },
        body: { findingId: finding.id, kind: 'explained', text: 'A diluted control was used' },
      })
    }
    await technician.call(submitBatch, { params: { id: batch.id }, body: { version: last.version } })
    batches.push(await technician.call(getBatch, { params: { id: batch.id } }))
    await aRun(at()) // still open: no part of any chart
  }, 60_000)

  it('shows the values of the run sheets in their order, with limits from the values themselves', async () => {
    const { points, center, upperAction, lowerAction, unit } = await chart('control')
    expect(points.map(({ value }) => value)).toEqual(shown('control'))
    expect(points.map(({ batchId }) => batchId)).toEqual(batches.map(({ id }) => id))
    const limits = individualsChart(points.map(({ value }) => value))
    expect([center, upperAction, lowerAction]).toEqual([
      limits.center,
      limits.upperAction,
      limits.lowerAction,
    ])
    expect(unit).toBe('%')
    expect((await chart('verification')).points.map(({ value }) => value)).toEqual(shown('verification'))
    expect((await chart('method-blank')).points.map(({ value }) => value)).toEqual(shown('method-blank'))
    // 0.25 mg/L is five times the reporting limit or more, so the relative difference is the figure: 0 % between equal readings
    expect((await chart('duplicate')).points.map(({ value }) => value)).toEqual(shown('duplicate'))
  })

  it('shows the slopes of signed calibrations per centimetre', async () => {
    await aSecondCalibration(at())
    const { points } = await chart('slope')
    expect(points).toHaveLength(2)
    // the line of IRON_STANDARDS: 0.197 A per mg/L in 1 cm
    for (const { value } of points) expect(value).toBeCloseTo(0.197, 3)
    // two points make no limits worth the name, yet nothing falls over
    expect(
      (await agent.call(getControlChart, { query: { methodId: '999999', kind: 'slope' } })).points,
    ).toEqual([])
  })
})

describe('a validation run', () => {
  it(
    'is kept with its hash, passes every published case, and can be read as data and on paper',
    { timeout: 240_000 },
    async () => {
      const run = await agent.call(runValidation, {})
      expect(run).toMatchObject({ engineVersion: ENGINE_VERSION, failed: 0, rendered: false })
      expect(run.cases).toBeGreaterThan(300)
      const early = await agent.refused(validationPdf, { params: { id: run.id } })
      expect(early.code).toBe('not-allowed-now')
      await at().get(JobsService).runNow(renderValidation, { id: run.id })
      const { bytes } = await agent.file(validationPdf, { params: { id: run.id } })
      await at().get(JobsService).runNow(renderValidation, { id: run.id })
      const again = await agent.file(validationPdf, { params: { id: run.id } })
      expect(again.bytes.equals(bytes)).toBe(true)
      const json = await agent.file(validationJson, { params: { id: run.id } })
      // whoever has the file can check the hash that the list shows
      expect(createHash('sha256').update(json.bytes).digest('hex')).toBe(run.sha256)
      const report = JSON.parse(json.bytes.toString('utf8')) as ValidationReport
      expect(report.rows).toHaveLength(run.cases)
      const pages = await pdfPages(bytes)
      const text = packed(pages.join(' '))
      expect(text).toContain(
        packed(
          `${report.cases} cases, ${report.comparisons} comparisons: ${report.passed} passed, 0 failed.`,
        ),
      )
      for (const row of [report.rows[0], report.rows.at(-1)]) {
        expect(text).toContain(packed(row?.title ?? 'missing'))
        expect(text).toContain(packed(row?.source ?? 'missing'))
      }
      expect(packed(pages.at(-1) ?? '')).toContain(packed(`Page ${pages.length} of ${pages.length}`))
      const { items } = await agent.call(listValidationRuns, {})
      expect(items).toEqual([{ ...run, rendered: true }])
      await expect(
        at().database.db.unwatched((trx) =>
          trx.updateTable('validationRuns').set({ failed: 1 }).where('id', '=', run.id).execute(),
        ),
      ).rejects.toThrow()
    },
  )

  it('that is not there is not found', async () => {
    expect((await agent.refused(validationPdf, { params: { id: '999999' } })).code).toBe('not-found')
    expect((await agent.refused(validationJson, { params: { id: '999999' } })).code).toBe('not-found')
  })
})
