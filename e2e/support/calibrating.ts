import { expect, type Locator, type Page } from '@playwright/test'
import { constructedReading, type Line, type Point } from './numbers.js'

export const standardsGrid = (page: Page) => page.getByRole('table', { name: 'Standards and their readings' })

/** A cell of a grid by its place among the cells that are typed into, counted from 0. */
export const cell = (grid: Locator, row: number, column: number) =>
  grid.locator(`input[data-row="${row}"][data-column="${column}"]`)

/** The form before the first reading: method, instrument, cell, lots. */
export async function startCalibration(
  page: Page,
  given: { methodTitle: string; cellPathCm: string; reagents: readonly string[] },
): Promise<void> {
  await page.goto('/calibrations/new')
  await page.getByRole('radio', { name: given.methodTitle }).check()
  await page.getByLabel('Instrument').selectOption({ index: 1 })
  await page.getByLabel('Cell path, cm').selectOption(given.cellPathCm)
  await page.getByLabel('Stock lot').selectOption({ index: 1 })
  for (const reagent of given.reagents) await page.getByRole('checkbox', { name: reagent }).first().check()
  await page.getByRole('button', { name: 'Start the calibration' }).click()
  await expect(page).toHaveURL(/\/calibrations\/\d+$/)
  await expect(page.getByRole('heading', { level: 1 })).toContainText(/Calibration K-\d\d-\d+/)
}

export const calibrationNumber = async (page: Page): Promise<string> => {
  const title = await page.getByRole('heading', { level: 1 }).innerText()
  return /K-\d\d-\d+/.exec(title)?.[0] ?? ''
}

/** Types every reading down the columns with Enter alone; @returns the points of the curve. */
export async function typeStandards(page: Page, slope: number): Promise<Point[]> {
  const grid = standardsGrid(page)
  await expect(cell(grid, 0, 1)).toBeVisible()
  const concentrations: number[] = []
  for (const input of await grid.locator('input[data-column="0"]').all()) {
    concentrations.push(Number(await input.inputValue()))
  }
  for (let columns = await grid.locator('input[data-row="0"]').count(); columns < 4; columns += 1) {
    await page.getByRole('button', { name: 'Add a reading column' }).click()
    await expect(cell(grid, 0, columns)).toBeVisible()
  }
  await page.getByLabel('Lot, second source').selectOption({ index: 1 })
  const points: Point[] = []
  const last = concentrations.length - 1
  await cell(grid, 0, 1).focus()
  for (let replicate = 0; replicate < 3; replicate += 1) {
    for (const [row, concentration] of concentrations.entries()) {
      await expect(cell(grid, row, replicate + 1)).toBeFocused()
      const text = constructedReading({ slope, concentration, row, replicate })
      await page.keyboard.insertText(text)
      await page.keyboard.press('Enter')
      // the last row is the second source, which judges the curve and is no part of it
      if (row < last) points.push({ concentration, absorbance: Number(text) })
    }
  }
  return points
}

/** The unrounded numbers behind `value ± error` of a line in the box of the curve. */
export async function exactly(page: Page, term: string): Promise<{ value: number; error: number }> {
  const title = await page
    .locator('dl.key-values > div')
    .filter({ has: page.getByText(term, { exact: true }) })
    .locator('[title]')
    .getAttribute('title')
  const [value = '', error = ''] = (title ?? '').split('±')
  return { value: Number(value), error: Number(error) }
}

export const shownOf = (page: Page, term: string) =>
  page
    .locator('dl.key-values > div')
    .filter({ has: page.getByText(term, { exact: true }) })
    .locator('dd')

/** The page's line beside one computed here. */
export async function expectLine(page: Page, line: Line): Promise<void> {
  await expect.poll(async () => (await exactly(page, 'Slope, A per mg/L')).value).toBeCloseTo(line.slope, 10)
  const slope = await exactly(page, 'Slope, A per mg/L')
  const intercept = await exactly(page, 'Intercept, A')
  expect(slope.error).toBeCloseTo(line.slopeError, 10)
  expect(intercept.value).toBeCloseTo(line.intercept, 10)
  expect(intercept.error).toBeCloseTo(line.interceptError, 10)
  await expect(shownOf(page, 'r')).toHaveText(line.r.toFixed(6))
}

export const saved = (page: Page, readings: number) =>
  expect(page.getByText(`All ${readings} readings are saved.`).first()).toBeVisible()

export async function submitCalibration(page: Page): Promise<void> {
  await page.getByRole('button', { name: 'Submit for signature' }).click()
  await page.getByRole('dialog').getByRole('button', { name: 'Submit', exact: true }).click()
  await expect(page.getByText('Submitted, waiting for signature').first()).toBeVisible()
}

/** From Today to the signature, as the person who decides goes. */
export async function openFromToday(page: Page, number: string): Promise<void> {
  await page.goto('/today')
  await page.getByRole('link', { name: new RegExp(`: .*${number}`) }).click()
  await expect(page.getByRole('heading', { level: 1 })).toContainText(number)
}

export async function sign(
  page: Page,
  given: { open: string; act: string; passphrase: string },
): Promise<void> {
  await page.getByRole('button', { name: given.open }).click()
  const dialog = page.getByRole('dialog')
  await dialog.getByLabel('Your passphrase').fill(given.passphrase)
  await dialog.getByRole('button', { name: given.act, exact: true }).click()
  await expect(dialog).toBeHidden()
}

export async function giveReason(
  page: Page,
  given: { open: string; act: string; reason: string },
): Promise<void> {
  await page.getByRole('button', { name: given.open, exact: true }).click()
  const dialog = page.getByRole('dialog')
  await dialog.getByLabel('Reason').fill(given.reason)
  await dialog.getByRole('button', { name: given.act, exact: true }).click()
  await expect(dialog).toBeHidden()
}
