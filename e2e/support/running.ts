import { expect, type Page } from '@playwright/test'
import type { BatchView, PositionView } from '@weirlight/shared/contracts'
import ExcelJS from 'exceljs'
import { cell } from './calibrating.js'
import { constructedReading } from './numbers.js'
import { laboratoryTime, minutesAgo } from './times.js'

export const runGrid = (page: Page) => page.getByRole('table', { name: /^Run sheet of / })

/** The form of a batch: its method, these samples of what waits, this calibration, what was prepared for it. */
export async function openBatch(
  page: Page,
  given: {
    methodTitle: string
    samples: readonly string[]
    calibration: string
    colourMinutes: number
    timeZone: string
  },
): Promise<void> {
  await page.goto('/batches/new')
  await page.getByRole('radiogroup', { name: 'Method' }).getByText(given.methodTitle).click()
  await page.getByRole('button', { name: 'None', exact: true }).click()
  for (const sample of given.samples) await page.getByRole('checkbox', { name: sample }).check()
  const calibration = page.getByLabel('Calibration in force')
  const option = calibration.locator('option', { hasText: given.calibration })
  await calibration.selectOption((await option.getAttribute('value')) ?? '')
  await page.getByLabel('Readings a position').selectOption('2')
  // proposed once the calibration is read
  await expect(page.getByLabel('Verification standard, mg/L')).not.toHaveValue('')
  await page
    .getByLabel('Colour reagent added')
    .fill(laboratoryTime(minutesAgo(given.colourMinutes), given.timeZone))
  await page.getByRole('button', { name: 'Open the batch' }).click()
  await expect(page).toHaveURL(/\/batches\/\d+$/)
  await expect(page.getByRole('heading', { level: 1 })).toContainText(/Batch B-\d\d-\d+/)
}

export const batchIdIn = (page: Page): string => /\/batches\/(\d+)/.exec(page.url())?.[1] ?? ''

/** What the spectrophotometer would show for each position: constructed from the true concentrations of the samples. */
export function constructedRun(
  batch: BatchView,
  given: { slope: number; truth: Record<string, number> },
): Map<string, string[]> {
  const byId = new Map(batch.rows.map((row) => [row.id, row]))
  const concentrationOf = (row: PositionView): number => {
    if (row.kind === 'blank' || row.kind === 'method-blank') return 0
    if (row.expected !== null) return Number(row.expected)
    const parent = row.ofPositionId === null ? row : byId.get(row.ofPositionId)
    return given.truth[parent?.sampleNumber ?? ''] ?? 0
  }
  return new Map(
    batch.rows.map((row) => [
      row.id,
      Array.from({ length: batch.replicates }, (_, replicate) =>
        constructedReading({
          slope: given.slope,
          concentration: concentrationOf(row),
          row: row.position,
          replicate,
        }),
      ),
    ]),
  )
}

const inOrder = (batch: BatchView) => batch.rows.toSorted((a, b) => a.position - b.position)

/** Down the first column, then the second, with Enter alone. */
export async function typeRun(page: Page, batch: BatchView, readings: Map<string, string[]>): Promise<void> {
  const grid = runGrid(page)
  await cell(grid, 0, 0).focus()
  for (let replicate = 0; replicate < batch.replicates; replicate += 1) {
    for (const [index, row] of inOrder(batch).entries()) {
      await expect(cell(grid, index, replicate)).toBeFocused()
      await page.keyboard.insertText(readings.get(row.id)?.[replicate] ?? '')
      await page.keyboard.press('Enter')
    }
  }
}

/** A block from a spreadsheet: tabs between columns, line ends between rows. */
export async function pasteRun(page: Page, batch: BatchView, readings: Map<string, string[]>): Promise<void> {
  const block = inOrder(batch)
    .map((row) => (readings.get(row.id) ?? []).join('\t'))
    .join('\r\n')
  await pasteInto(page, block)
}

export async function pasteInto(
  page: Page,
  block: string,
  at: { row: number; column: number } = { row: 0, column: 0 },
) {
  await page.context().grantPermissions(['clipboard-read', 'clipboard-write'])
  await page.evaluate((text) => navigator.clipboard.writeText(text), block)
  await cell(runGrid(page), at.row, at.column).focus()
  await page.keyboard.press('Control+V')
}

/** The workbook that the page hands out, filled in as a person would. */
export async function filledWorkbook(
  workbookFile: Buffer,
  batch: BatchView,
  readings: Map<string, string[]>,
): Promise<Buffer> {
  const book = new ExcelJS.Workbook()
  // its own types know an older Buffer than Node's
  await book.xlsx.load(workbookFile as unknown as Parameters<typeof book.xlsx.load>[0])
  const [sheet] = book.worksheets
  if (!sheet) throw new Error('The workbook has no sheet.')
  let head = 0
  const columns = new Map<string, number>()
  sheet.eachRow((row, number) => {
    if (head > 0) return
    row.eachCell((each, column) => columns.set(each.text.trim(), column))
    if (columns.has('Position')) head = number
    else columns.clear()
  })
  const column = (name: string) => {
    const found = columns.get(name)
    if (!found) throw new Error(`The workbook has no column ${name}.`)
    return found
  }
  const byPosition = new Map(batch.rows.map((row) => [String(row.position), row]))
  sheet.eachRow((row, number) => {
    if (number <= head) return
    const position = byPosition.get(row.getCell(column('Position')).text.trim())
    const values = position ? (readings.get(position.id) ?? []) : []
    values.forEach((text, index) => (row.getCell(column(`A${index + 1}`)).value = Number(text)))
  })
  return Buffer.from(await book.xlsx.writeBuffer())
}

export function csvOf(batch: BatchView, readings: Map<string, string[]>): Buffer {
  const columns = Array.from({ length: batch.replicates }, (_, index) => `A${index + 1}`)
  const rows = inOrder(batch).map((row) => [row.position, ...(readings.get(row.id) ?? [])].join(','))
  return Buffer.from([['Position', ...columns].join(','), ...rows].join('\r\n'))
}

/** Through the preview, which shows every row before anything is entered. */
export async function loadFile(
  page: Page,
  given: { name: string; type: string; content: Buffer; rows: number; sees: string },
): Promise<void> {
  await page.getByRole('link', { name: 'Load a file' }).click()
  await page
    .getByLabel(/Choose or drop a file of readings/)
    .setInputFiles({ name: given.name, mimeType: given.type, buffer: given.content })
  const preview = page.getByRole('region', { name: 'Preview of readings' })
  await expect(preview.getByText('will be entered')).toHaveCount(given.rows)
  await expect(preview).toContainText(given.sees)
  await page.getByRole('button', { name: `Enter ${given.rows} rows` }).click()
  await expect(runGrid(page)).toBeVisible()
}

export const rowOf = (page: Page, words: string) =>
  runGrid(page).getByRole('row').filter({ hasText: words }).first()

export async function submitBatch(page: Page): Promise<void> {
  await page.getByRole('button', { name: 'Submit for review' }).click()
  await page.getByRole('dialog').getByRole('button', { name: 'Submit', exact: true }).click()
  await expect(page.getByText('Submitted for review', { exact: true }).first()).toBeVisible()
}
