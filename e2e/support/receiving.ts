import { expect, type Page } from '@playwright/test'
import { hoursAgo, laboratoryTime, minutesAgo } from './times.js'

export interface Bottle {
  /** code and name as the list writes them */
  client: string
  point: string
  /** as the list of methods calls it, e.g. `Iron, total` */
  determination: string
  methodTitle: string
  preservation: 'None' | 'Nitric acid'
  ph: string
  temperatureC: string
  collectedBy: string
  timeZone: string
}

const choose = (page: Page, word: string) => page.locator('label').getByText(word, { exact: true }).click()

/** One bottle through the form; @returns its number. The sample is not yet accepted. */
export async function receive(page: Page, bottle: Bottle, { isNext = false } = {}): Promise<string> {
  if (!isNext) {
    await page.goto('/receiving/new')
    const client = page.getByRole('combobox', { name: 'Client' })
    await client.fill(bottle.client)
    await expect(page.getByTitle(bottle.client).first()).toBeVisible()
    await page.keyboard.press('Enter')
  }
  const point = page.getByRole('combobox', { name: 'Sampling point' })
  await expect(point).toBeEnabled()
  await point.fill(bottle.point)
  await expect(page.getByTitle(bottle.point).first()).toBeVisible()
  await page.keyboard.press('Enter')
  if (!isNext) {
    await choose(page, 'Operational')
    await choose(page, bottle.preservation)
    await choose(page, 'Plastic')
    await page.getByLabel('Collected by').fill(bottle.collectedBy)
    await page.getByLabel('Received', { exact: true }).fill(laboratoryTime(minutesAgo(3), bottle.timeZone))
    await page.getByRole('group', { name: 'Determinations by method' }).getByText(bottle.methodTitle).click()
  }
  await page.getByLabel('Collected', { exact: true }).fill(laboratoryTime(hoursAgo(2), bottle.timeZone))
  await page.getByLabel('pH, as read').fill(bottle.ph)
  await page.getByLabel('Temperature, °C').fill(bottle.temperatureC)
  await page.getByLabel('Condition').fill('Intact, label readable, clear')
  await page.getByRole('button', { name: 'Receive the sample' }).click()
  const heading = page.getByRole('heading', { level: 2, name: /^S-\d\d-\d+$/ })
  await expect(heading).toBeVisible()
  return heading.innerText()
}

/** Every check is met: taken. */
export async function accept(page: Page): Promise<void> {
  await page.getByRole('button', { name: 'Accept', exact: true }).click()
  await expect(page.getByText('Accepted', { exact: true }).first()).toBeVisible()
}
