import { addInstrument, getBatch, getSession, recordCheck } from '@weirlight/shared/contracts'
import type { Page } from '@playwright/test'
import sets from '../fixtures/assay/cases/iron-sets.json' with { type: 'json' }
import { accountOf } from './support/accounts.js'
import type { Api } from './support/api.js'
import {
  calibrationNumber,
  cell,
  exactly,
  openFromToday,
  saved,
  shownOf,
  standardsGrid,
  submitCalibration,
} from './support/calibrating.js'
import { batchIdIn, runGrid, rowOf } from './support/running.js'
import { acceptedSample } from './support/set-up.js'
import { expect, test } from './support/test.js'
import { laboratoryTime, minutesAgo } from './support/times.js'

/*
 * A published calibration of iron with 1,10-phenanthroline: six standards with their absorbances, slope and intercept
 * with standard errors, and an unknown (a public laboratory report; as fixtures/assay/cases/iron-sets.json has it, read
 * second-hand). Published in mol/L; the page wants mg/L.
 */

/** g/mol of iron, as the published conversion used it; CIAAW 1993 */
const MOLAR_MASS = 55.845
/** L/mol from A per mg/L: mg in a mole */
const MILLIGRAMS = MOLAR_MASS * 1000

const caseOf = (id: string) => {
  const found = sets.find((each) => each.id === id)
  if (!found) throw new Error(`The fixture has no case ${id}.`)
  return found
}
const line = caseOf('iron-1-line') as unknown as {
  input: { points: { concentration: number; absorbance: number }[] }
  expected: Record<string, number>
}
const standards = line.input.points.map((point) => ({
  milligrams: (point.concentration * MILLIGRAMS).toPrecision(12),
  absorbance: String(point.absorbance),
}))
const published = (name: string) => line.expected[name] ?? Number.NaN

/** An instrument of its own, so that no other calibration is replaced. */
async function ownInstrument(api: Api): Promise<string> {
  const made = await api.call(addInstrument, {
    body: {
      name: 'Spectrophotometer of the published set',
      kind: 'Single beam, 2 nm',
      serial: `PUB-${Date.now()}`,
      location: 'Bench C',
      bandwidthNm: '2',
    },
  })
  const year = new Date().getUTCFullYear() + 1
  for (const [kind, nominal, tolerance, unit] of [
    ['wavelength', '536.5', '1.0', 'nm'],
    ['photometric', '0.500', '0.005', 'A'],
    ['baseline', '0.000', '0.002', 'A'],
    ['stray-light', '0.0', '0.1', '%T'],
  ] as const) {
    await api.call(recordCheck, {
      params: { id: made.id },
      body: {
        kind,
        reference: 'Reference set 4',
        nominal,
        found: nominal,
        tolerance,
        unit,
        nextDueOn: `${year}-06-30`,
        note: '',
      },
    })
  }
  return made.number
}

async function enterPublishedSet(page: Page, instrument: string): Promise<string> {
  await page.goto('/calibrations/new')
  await page.getByRole('radio', { name: 'Iron by 1,10-phenanthroline' }).check()
  const select = page.getByLabel('Instrument')
  const option = select.locator('option', { hasText: instrument })
  await select.selectOption((await option.getAttribute('value')) ?? '')
  await page.getByLabel('Cell path, cm').selectOption('1')
  await page.getByLabel('Stock lot').selectOption({ index: 1 })
  await page.getByRole('button', { name: 'Start the calibration' }).click()
  await expect(page).toHaveURL(/\/calibrations\/\d+$/)

  // as many rows as the published table has
  const grid = standardsGrid(page)
  const rows = grid.locator('input[data-column="0"]')
  await expect(rows.first()).toBeVisible()
  for (let left = await rows.count(); left > standards.length; left -= 1) {
    await page
      .getByRole('button', { name: /^More for the/ })
      .last()
      .click()
    await page.getByRole('menuitem', { name: 'Remove the row…' }).click()
    await expect(rows).toHaveCount(left - 1)
  }
  for (const [row, standard] of standards.entries()) {
    await cell(grid, row, 0).fill(standard.milligrams)
    await page.keyboard.press('Tab')
    await cell(grid, row, 1).fill(standard.absorbance)
    await page.keyboard.press('Tab')
  }
  return calibrationNumber(page)
}

test('the published iron calibration gives its published numbers through the page', async ({ as, apiOf }) => {
  const technician = accountOf('technician', 2)
  const manager = accountOf('qa-manager', 1)
  const api = await apiOf(technician)
  const { session } = await api.call(getSession, {})
  const page = await as(technician)
  const number = await enterPublishedSet(page, await ownInstrument(api))

  await test.step('slope and intercept with their errors', async () => {
    await expect
      .poll(async () => (await exactly(page, 'Slope, A per mg/L')).value * MILLIGRAMS)
      .toBeCloseTo(published('coefficients.1'), 2)
    const slope = await exactly(page, 'Slope, A per mg/L')
    const intercept = await exactly(page, 'Intercept, A')
    // 10553.63 ± 190.5558 L/mol and −0.00363 ± 0.007721
    expect(Math.abs(slope.value * MILLIGRAMS - published('coefficients.1'))).toBeLessThan(0.0051)
    expect(Math.abs(slope.error * MILLIGRAMS - published('standardErrors.1'))).toBeLessThan(0.000051)
    expect(Math.abs(intercept.value - published('coefficients.0'))).toBeLessThan(0.0000051)
    expect(Math.abs(intercept.error - published('standardErrors.0'))).toBeLessThan(0.00000051)
    await expect(page.getByText(/ε from this slope/)).toContainText('10,550')
    await expect(shownOf(page, 'r²')).toHaveText('0.998698')
  })

  await test.step('used for results once somebody answers for what the set does not have', async () => {
    await saved(page, standards.length)
    await page
      .getByLabel('Note', { exact: true })
      .fill('Published set: six standards, read once, without a second source.')
    await expect(page.getByText(`All ${standards.length} readings are saved.`).first()).toBeVisible()
    await submitCalibration(page)
    const desk = await as(manager)
    await openFromToday(desk, number)
    await desk.getByRole('button', { name: 'Sign for use' }).click()
    const dialog = desk.getByRole('dialog')
    await expect(dialog).toContainText('Second source within 95 to 105 %')
    await dialog
      .getByLabel('Why it may be used although criteria are not met')
      .fill('A published set, read to compare its numbers.')
    await dialog.getByLabel('Your passphrase').fill(manager.passphrase)
    await dialog.getByRole('button', { name: 'Sign for use', exact: true }).click()
    await expect(desk.getByText('In force', { exact: true }).first()).toBeVisible()
  })

  await test.step('the published unknown, read in a batch', async () => {
    const sample = await acceptedSample(api, { client: 'AV', point: 'AV-03', method: 'fe-phenanthroline' })
    await page.goto('/batches/new')
    await page.getByRole('radiogroup', { name: 'Method' }).getByText('Iron by 1,10-phenanthroline').click()
    await page.getByRole('button', { name: 'None', exact: true }).click()
    await page.getByRole('checkbox', { name: sample.number }).check()
    const calibration = page.getByLabel('Calibration in force')
    const option = calibration.locator('option', { hasText: number })
    await calibration.selectOption((await option.getAttribute('value')) ?? '')
    await page.getByLabel('Readings a position').selectOption('1')
    await expect(page.getByLabel('Verification standard, mg/L')).not.toHaveValue('')
    await page
      .getByLabel('Colour reagent added')
      .fill(laboratoryTime(minutesAgo(20), session?.timeZone ?? ''))
    await page.getByRole('button', { name: 'Open the batch' }).click()
    await expect(page).toHaveURL(/\/batches\/\d+$/)
    const { rows } = await api.call(getBatch, { params: { id: batchIdIn(page) } })
    const index = rows.findIndex((row) => row.kind === 'sample')
    await cell(runGrid(page), index, 0).fill('0.096')
    const row = rowOf(page, sample.number)
    const title = await row.locator('[title*="unrounded"]').getAttribute('title')
    const milligrams = Number.parseFloat(title ?? '')
    // 9.44e-6 mol/L as published; 9.4407e-6 mol/L, 0.5272 mg/L with more digits
    expect(Math.abs(milligrams / MILLIGRAMS - 9.44e-6)).toBeLessThan(5.1e-9)
    expect(Math.abs(milligrams / MILLIGRAMS - 9.4407e-6)).toBeLessThan(5.1e-11)
    expect(milligrams).toBeCloseTo(0.5272, 4)
    await page.keyboard.press('Enter')
    await expect(row).toContainText('0.53')
    await expect(row).toContainText('above 0.3')
  })
})
