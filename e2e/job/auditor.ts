import { returnBatch, type BatchView } from '@weirlight/shared/contracts'
import type { Page } from '@playwright/test'
import type { Api } from '../support/api.js'
import { expect } from '../support/test.js'
import { laboratoryTime } from '../support/times.js'
import type { Way } from './way.js'

/** The numbers that the job has come to. */
export interface Audited {
  calibration: string
  certificate: string
  batch: BatchView
  /** as the certificate says it, mg/L */
  reported: string
}

const today = (way: Way) => laboratoryTime(new Date(), way.timeZone).slice(0, 10)

const history = (page: Page) => {
  const entries = page.getByRole('table', { name: 'History, newest first' })
  const filters = page.getByRole('search').filter({ has: page.getByLabel('Person') })
  return {
    entries,
    filters,
    lines: (words: string) => entries.getByRole('row').filter({ hasText: words }),
    // a label around its select carries the words of every option as well
    narrow: (label: string, option: string) =>
      filters
        .locator('label', { hasText: new RegExp(`^${label}`) })
        .getByRole('combobox')
        .selectOption({ label: option }),
  }
}

/** Every step stands in the history: who, when, what was done. */
export async function findEveryStep(page: Page, way: Way, given: Audited): Promise<void> {
  const { metal, technician, manager, client, high } = way
  const { batch, calibration, certificate } = given
  const { filters, lines, narrow } = history(page)
  await page.goto('/history')
  for (const [number, words, who] of [
    [high, 'Received a sample', technician],
    [high, 'Accepted a sample', technician],
    [calibration, 'Submitted a calibration', technician],
    [calibration, 'Signed a calibration', manager],
    [batch.number, 'Submitted a batch', technician],
    [batch.number, 'Released a batch', manager],
    [certificate, 'Opened a certificate', client],
  ] as const) {
    await filters.getByLabel('Number').fill(number)
    const line = lines(words).first()
    await expect(line).toBeVisible()
    await expect(line).toContainText(who.name)
    await expect(line).toContainText(today(way))
  }
  if (metal.isSentBackFirst) {
    await filters.getByLabel('Number').fill('')
    await narrow('What was done', 'Sent a calibration back')
    await expect(lines('read without its own blank').first()).toContainText(manager.name)
  }
}

/** By person, thing and day; and what an entry changed, old and new side by side. */
export async function narrowTheHistory(page: Page, way: Way, { batch }: Audited): Promise<void> {
  const { entries, filters, lines, narrow } = history(page)
  await page.goto('/history')
  await narrow('Person', way.client.name)
  await narrow('Thing', 'Alert')
  await expect(lines('Acknowledged an alert').first()).toContainText('The duty operator has shut the valve.')
  await expect(lines(way.technician.name)).toHaveCount(0)
  await filters.getByLabel('From day').fill(today(way))
  await expect(lines('Acknowledged an alert').first()).toBeVisible()
  await filters.getByLabel('From day').fill('')
  await filters.getByLabel('To day').fill('2020-01-01')
  await expect(page.getByText('No entry fits')).toBeVisible()

  await page.goto(`/history?number=${batch.number}&thing=batches`)
  await lines('Released a batch').first().getByRole('button').first().click()
  await expect(entries.locator('.history-details')).toContainText('released')
}

/** From the certificate's number to everything behind it. */
export async function followTheNumber(page: Page, way: Way, given: Audited): Promise<void> {
  const { batch, calibration, certificate, reported } = given
  await page.keyboard.press('Control+k')
  await page.keyboard.type(certificate)
  await page.keyboard.press('Enter')
  await expect(page.getByRole('heading', { level: 1 })).toHaveText(`Certificate ${certificate}`)
  await page.getByRole('button', { name: `${reported} mg/L: what is behind this number` }).click()
  const drawer = page.getByRole('dialog')
  await expect(drawer).toContainText(`Behind ${reported} mg/L`)
  await expect(drawer).toContainText('same')
  await drawer.getByRole('link', { name: 'Open as a page' }).click()
  await expect(page.getByRole('heading', { level: 1 })).toHaveText(`Behind ${reported} mg/L`)
  const position = batch.rows.find((row) => row.sampleNumber === way.high && row.kind === 'sample')
  for (const reading of position?.readings ?? []) {
    await expect(page.getByRole('region', { name: 'Readings' })).toContainText(reading.absorbance)
  }
  await expect(page.getByRole('link', { name: calibration }).first()).toBeVisible()
  await expect(page.getByRole('region', { name: 'Standards' }).getByRole('row')).not.toHaveCount(1)
  await expect(page.getByRole('region', { name: 'Lots' })).toContainText('stock')
}

/** Nothing to press that changes anything, and nothing that could be sent past the page. */
export async function expectNoHand(page: Page, api: Api, { batch }: Audited): Promise<void> {
  const acts =
    /^(Submit|Sign|Send back|Release|Accept|Reject|Correct|Withdraw|Amend|Close|Cancel|Take out|Start|Open the|New )/
  for (const path of [
    `/batches/${batch.id}`,
    `/review/batches/${batch.id}`,
    `/calibrations/${batch.calibrationId}`,
  ]) {
    await page.goto(path)
    await expect(page.getByRole('heading', { level: 1 })).toBeVisible()
    await expect(page.getByRole('main').getByRole('button', { name: acts })).toHaveCount(0)
    await expect(page.locator('input[data-row]')).toHaveCount(0)
  }
  for (const path of ['/receiving/new', '/calibrations/new', '/batches/new', '/bench/materials/new']) {
    await page.goto(path)
    await expect(page.getByText('This part of the laboratory is not open to your role')).toBeVisible()
  }
  const refused = await api.send(returnBatch, {
    params: { id: batch.id },
    body: { version: batch.version, reason: 'An auditor must not be able to.' },
  })
  expect(refused.status).toBe(403)
}
