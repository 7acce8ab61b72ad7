import type { Page } from '@playwright/test'
import { getBatch, type BatchView } from '@weirlight/shared/contracts'
import {
  calibrationNumber,
  expectLine,
  openFromToday,
  saved,
  shownOf,
  submitCalibration,
  typeStandards,
} from '../support/calibrating.js'
import { leastSquares, type Line } from '../support/numbers.js'
import { accept, receive } from '../support/receiving.js'
import {
  batchIdIn,
  constructedRun,
  csvOf,
  filledWorkbook,
  loadFile,
  openBatch,
  pasteRun,
  rowOf,
  submitBatch,
  typeRun,
} from '../support/running.js'
import { expect } from '../support/test.js'
import type { Bottles, Start, Way } from './way.js'

/** Two bottles of one client, received one after the other and accepted. */
export async function receiveSamples(page: Page, { metal, timeZone }: Start): Promise<Bottles> {
  const bottle = { ...metal, client: metal.client.label, collectedBy: 'R. Amble, field round', timeZone }
  const low = await receive(page, { ...bottle, point: metal.below.point })
  await accept(page)
  await page.getByRole('button', { name: 'Receive another from this client' }).click()
  const high = await receive(page, { ...bottle, point: metal.above.point }, { isNext: true })
  await accept(page)
  expect(high).not.toBe(low)
  return { low, high }
}

export interface Calibration {
  number: string
  line: Line
}

/** Typed, judged as it is typed, kept, submitted. */
export async function calibrate(page: Page, { metal, slope, molarMass }: Start): Promise<Calibration> {
  const number = await calibrationNumber(page)
  const points = await typeStandards(page, slope)
  const line = leastSquares(points)
  await expectLine(page, line)
  const epsilon = (line.slope * molarMass * 1000) / Number(metal.cellPathCm)
  await expect(page.getByText(/ε from this slope/)).toContainText(
    Number(epsilon.toPrecision(4)).toLocaleString('en-US'),
  )
  await expect(shownOf(page, 'r²')).toHaveText((line.r ** 2).toFixed(6))
  await saved(page, points.length + 3)
  await submitCalibration(page)
  return { number, line }
}

/** What came back with a reason is read on Today and started over from a copy. */
export async function startOver(
  page: Page,
  { number, reason }: { number: string; reason: string },
): Promise<void> {
  await openFromToday(page, number)
  await expect(page.getByText(reason).first()).toBeVisible()
  await page.getByRole('button', { name: 'Start over from a copy' }).click()
  await expect(page.getByRole('heading', { level: 1 })).not.toContainText(number)
}

/** A batch from what waits: opened, read, submitted. */
export async function runBatch(page: Page, way: Way, calibration: Calibration): Promise<BatchView> {
  await openBatch(page, {
    methodTitle: way.metal.methodTitle,
    samples: [way.low, way.high],
    calibration: calibration.number,
    colourMinutes: way.metal.colourMinutes,
    timeZone: way.timeZone,
  })
  const params = { id: batchIdIn(page) }
  const opened = await way.bench.call(getBatch, { params })
  expect(new Set(opened.rows.map((row) => row.kind))).toEqual(
    new Set(['blank', 'verification', 'method-blank', 'control', 'sample', 'duplicate']),
  )
  await enterReadings(page, way, { opened, line: calibration.line })
  await submitBatch(page)
  return way.bench.call(getBatch, { params })
}

/** How much of a number two computations must share. */
const CLOSE = 10

/** The readings, each metal by another road; what they come to stands on the sheet as it is entered. */
async function enterReadings(page: Page, way: Way, given: { opened: BatchView; line: Line }): Promise<void> {
  const { metal, bench, low, high } = way
  const { opened, line } = given
  const truth = { [low]: metal.below.mgPerL, [high]: metal.above.mgPerL }
  const readings = constructedRun(opened, { slope: way.slope, truth })
  const positions = opened.rows.length
  const sample = opened.rows.find((row) => row.sampleNumber === high && row.kind === 'sample')
  const texts = readings.get(sample?.id ?? '') ?? []
  if (metal.entered === 'typed') await typeRun(page, opened, readings)
  if (metal.entered === 'pasted') await pasteRun(page, opened, readings)
  if (metal.entered === 'xlsx') {
    const empty = await bench.file(`/api/batches/${opened.id}/run-sheet.xlsx`)
    await loadFile(page, {
      name: `${opened.number}.xlsx`,
      type: 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet',
      content: await filledWorkbook(empty, opened, readings),
      rows: positions,
      sees: high,
    })
  }
  if (metal.entered === 'csv') {
    const content = csvOf(opened, readings)
    await loadFile(page, { name: 'readings.csv', type: 'text/csv', content, rows: positions, sees: high })
  }
  const row = rowOf(page, high)
  await expect(row).toContainText(`above ${metal.above.limit}`)
  await expect(rowOf(page, low)).toContainText('below')
  await expect(rowOf(page, 'control')).toContainText('%')
  // near the reporting limit two measurements are compared in mg/L
  await expect(rowOf(page, 'duplicate')).toContainText(/% apart|mg\/L apart/)
  await expect(rowOf(page, 'method blank')).toContainText('below')
  // concentration = (mean absorbance − intercept) ÷ slope
  const mean = texts.reduce((sum, text) => sum + Number(text), 0) / texts.length
  const title = await row.locator('[title*="unrounded"]').getAttribute('title')
  expect(Number.parseFloat(title ?? '')).toBeCloseTo((mean - line.intercept) / line.slope, CLOSE)
  await expect(page.getByText(`${positions * 2} of ${positions * 2} readings`)).toBeVisible()
  await expect(page.getByText(/^All \d+ readings are saved/).first()).toBeVisible()
}
