import { exportResults, listResults, resultTrend, type ResultRow } from '@weirlight/shared/contracts'
import exceljs from 'exceljs'
import { beforeAll, describe, expect, it } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import {
  ABOVE,
  aReleasedResult,
  aSubmittedBatch,
  BELOW,
  NOTHING,
  theBench,
} from '../../testing/builders/results.builders.js'
import { aPoint } from '../../testing/builders/samples.builders.js'
import type { Agent } from '../../testing/agent.js'
import { useTestApp } from '../../testing/test-app.js'
import { ResultsModule } from './index.js'

// Absorbances and what they come to are constructed.
const at = useTestApp({ imports: [ResultsModule] })
const HOUR = 3_600_000
const numbers = (page: { items: ResultRow[] }) => page.items.map(({ sampleNumber }) => sampleNumber)

describe('results', () => {
  let agent: Agent
  let point: Awaited<ReturnType<typeof aPoint>>
  let above: Awaited<ReturnType<typeof aReleasedResult>>
  let below: Awaited<ReturnType<typeof aReleasedResult>>
  let nothing: Awaited<ReturnType<typeof aReleasedResult>>
  let elsewhere: Awaited<ReturnType<typeof aReleasedResult>>
  let measured: Awaited<ReturnType<typeof aSubmittedBatch>>

  beforeAll(async () => {
    const now = at().database.clock.now().getTime()
    point = await aPoint(at().database)
    const own = { clientId: point.clientId, pointId: point.id }
    const collected = (hours: number) => ({
      sample: { collectedAt: new Date(now - hours * HOUR).toISOString() },
    })
    above = await aReleasedResult(at(), { ...own, reading: ABOVE, ...collected(30) })
    below = await aReleasedResult(at(), { ...own, reading: BELOW, ...collected(60) })
    nothing = await aReleasedResult(at(), { ...own, reading: NOTHING, ...collected(24) })
    elsewhere = await aReleasedResult(at(), { reading: BELOW })
    measured = await aSubmittedBatch(at())
    await at().database.db.transaction(SYSTEM, 'client.change', null, (trx) =>
      trx
        .updateTable('clients')
        .set({ name: '=HYPERLINK("http://elsewhere.example","+1")' })
        .where('id', '=', elsewhere.clientId)
        .execute(),
    )
    agent = await at().as((await theBench(at())).reviewer)
  }, 60_000)

  it('are listed newest first, page by page without a gap', async () => {
    const all = await agent.call(listResults, { query: {} })
    expect(all.items).toHaveLength(5)
    expect(all.items.map(({ state }) => state)).toEqual([
      'measured',
      'released',
      'released',
      'released',
      'released',
    ])
    const first = await agent.call(listResults, { query: { limit: 3 } })
    const second = await agent.call(listResults, { query: { limit: 3, after: first.next ?? '' } })
    expect([...numbers(first), ...numbers(second)]).toEqual(numbers(all))
    expect(second.next).toBeNull()
    expect((await agent.refused(listResults, { query: { after: 'nonsense' } })).errors?.[0]?.path).toBe(
      'after',
    )
  })

  it('are found by client, point, method, analyte, state, finding, sample and day of collection', async () => {
    const found = async (query: object) => numbers(await agent.call(listResults, { query })).sort()
    const own = [above, below, nothing].map(({ result }) => result.sampleNumber)
    expect(await found({ clientId: point.clientId })).toEqual([...own].sort())
    expect(await found({ pointId: point.id, verdict: 'above' })).toEqual([above.result.sampleNumber])
    expect(await found({ pointId: point.id, verdict: 'below' })).toEqual(
      [below, nothing].map(({ result }) => result.sampleNumber).sort(),
    )
    expect(await found({ analyte: 'Cu' })).toEqual([])
    expect(await found({ methodId: above.result.methodId, state: 'measured' })).toEqual(
      measured.batch.rows.flatMap(({ sampleNumber, kind }) =>
        kind === 'sample' ? (sampleNumber ?? []) : [],
      ),
    )
    expect(await found({ sample: below.result.sampleNumber.toLowerCase() })).toEqual([
      below.result.sampleNumber,
    ])
    expect(await found({ sample: '%' })).toHaveLength(5)
    // a day is the laboratory's (America/New_York in the test laboratory)
    const day = new Intl.DateTimeFormat('en-CA', { timeZone: 'America/New_York' }).format(
      new Date(below.result.collectedAt),
    )
    expect(await found({ from: day, to: day })).toEqual([below.result.sampleNumber])
  })

  it('of a point run in the order of collection, with the limit in the unit shown', async () => {
    const trend = await agent.call(resultTrend, {
      query: { pointId: point.id, analyte: 'Fe', form: 'total' },
    })
    expect(trend.unit).toBe('ug/L')
    // eu-fe-indicator, 200 µg/L (fixtures/reference/limits.json)
    expect(trend.limit?.value).toBe(200)
    expect(trend.points.map(({ resultId }) => resultId)).toEqual(
      [below, above, nothing].map(({ result }) => result.id),
    )
    expect(trend.points.map(({ nonDetect }) => nonDetect)).toEqual([false, false, true])
    const value = trend.points[1]?.value ?? 0
    expect(value).toBeGreaterThan(245)
    expect(value).toBeLessThan(262)
    expect((await agent.call(resultTrend, { query: { pointId: point.id, analyte: 'Mn' } })).points).toEqual(
      [],
    )
  })

  it('leave as CSV that a spreadsheet opens without running anything', async () => {
    const { bytes, headers } = await agent.file(exportResults, {
      query: { format: 'csv', state: 'released' },
    })
    expect(String(headers['content-type'])).toContain('text/csv')
    expect(String(headers['content-disposition'])).toMatch(/results-\d{4}-\d\d-\d\d\.csv/)
    const lines = bytes.toString('utf8').trim().split('\r\n')
    expect(lines).toHaveLength(5)
    const forged = lines.find((line) => line.includes(elsewhere.result.sampleNumber)) ?? ''
    expect(forged).toContain(`"'=HYPERLINK(""http://elsewhere.example"",""+1"")"`)
    expect(lines.some((line) => /(^|,)"?=/.test(line))).toBe(false)
    expect(forged).toContain(String(elsewhere.result.concentration))
  })

  it('leave as a workbook of texts and numbers, without a formula', async () => {
    const { bytes } = await agent.file(exportResults, { query: { format: 'xlsx', verdict: 'above' } })
    const book = new exceljs.Workbook()
    await book.xlsx.load(bytes as unknown as Parameters<typeof book.xlsx.load>[0])
    const sheet = book.worksheets[0]
    const header = (sheet?.getRow(1).values as string[]).slice(1)
    const row = (sheet?.getRow(sheet.rowCount).values as unknown[]).slice(1)
    const cell = (name: string) => row[header.indexOf(name)]
    expect(cell('Sample')).toBe(above.result.sampleNumber)
    expect(cell('Unrounded mg/L')).toBe(above.result.concentration)
    expect([cell('Result'), cell('Unit'), cell('Finding')]).toEqual([above.result.text, 'µg/L', 'above'])
    const every = await agent.file(exportResults, { query: { format: 'xlsx' } })
    const whole = new exceljs.Workbook()
    await whole.xlsx.load(every.bytes as unknown as Parameters<typeof whole.xlsx.load>[0])
    const kinds = new Set<number>()
    whole.worksheets[0]?.eachRow((one) => one.eachCell(({ type }) => kinds.add(type)))
    expect(kinds.has(exceljs.ValueType.Formula)).toBe(false)
  })
})
