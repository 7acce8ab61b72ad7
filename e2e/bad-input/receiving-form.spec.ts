import { randomUUID } from 'node:crypto'
import type { Page } from '@playwright/test'
import { getSample, getSession, listSamples, receiveSample } from '@weirlight/shared/contracts'
import { accountOf } from '../support/accounts.js'
import { ironPoint, receiptOf } from '../support/set-up.js'
import { expect, test } from '../support/test.js'
import { hoursAgo, laboratoryTime } from '../support/times.js'

async function fillForm(page: Page, zone: string): Promise<void> {
  await page.getByRole('combobox', { name: 'Client' }).fill('AV · Ambry Vale Rural Water')
  await expect(page.getByTitle('AV · Ambry Vale Rural Water').first()).toBeVisible()
  await page.keyboard.press('Enter')
  const point = page.getByRole('combobox', { name: 'Sampling point' })
  await expect(point).toBeEnabled()
  await point.fill('AV-05 · Lower well')
  await expect(page.getByTitle('AV-05 · Lower well').first()).toBeVisible()
  await page.keyboard.press('Enter')
  for (const word of ['Operational', 'Nitric acid', 'Plastic']) {
    await page.locator('label').getByText(word, { exact: true }).click()
  }
  await page.getByLabel('Collected', { exact: true }).fill(laboratoryTime(hoursAgo(2), zone))
  await page.getByLabel('Collected by').fill('Field round, wrong clock')
  await page.getByLabel('Received', { exact: true }).fill(laboratoryTime(hoursAgo(1), zone))
  await page.getByLabel('pH, as read').fill('1.6')
  await page.getByLabel('Temperature, °C').fill('5.0')
  await page
    .getByRole('group', { name: 'Determinations by method' })
    .getByText('Iron by 1,10-phenanthroline')
    .click()
}

test('the receiving form: times in the wrong order, a decimal comma, nothing chosen', async ({
  as,
  apiOf,
}) => {
  const technician = accountOf('technician')
  const api = await apiOf(technician)
  const { session } = await api.call(getSession, {})
  const zone = session?.timeZone ?? ''
  const page = await as(technician)
  await page.goto('/receiving/new')
  await page.getByLabel('Collected', { exact: true }).fill(laboratoryTime(hoursAgo(1), zone))
  await page.getByLabel('Received', { exact: true }).fill(laboratoryTime(hoursAgo(4), zone))
  await page.getByLabel('pH, as read').fill('7,2')
  await page.getByLabel('Temperature, °C').fill('warm')
  await page.getByRole('button', { name: 'Receive the sample' }).click()
  const field = (label: string) =>
    page.locator('.ant-form-item').filter({ has: page.getByLabel(label, { exact: true }) })
  await expect(field('pH, as read')).toContainText('Use a decimal point: 7.2')
  await expect(field('Temperature, °C')).toContainText('“warm” is not a number.')
  await expect(field('Collected by')).toContainText('Please fill this in.')
  await expect(page.getByRole('main')).toContainText('Choose at least one determination.')

  // the order of times is looked at once the rest is right, and said at once by the server
  const receipt = await receiptOf(api, ironPoint)
  const refused = await api.send(receiveSample, {
    body: { ...receipt, collectedAt: hoursAgo(1).toISOString(), receivedAt: hoursAgo(4).toISOString() },
  })
  expect(refused.status).toBe(422)
  expect(JSON.parse(refused.text)).toMatchObject({
    errors: [{ path: 'receivedAt', message: 'Received before it was collected: check both times.' }],
  })

  // mended one by one, nothing typed is lost
  await fillForm(page, zone)
  await page.getByLabel('Received', { exact: true }).fill(laboratoryTime(hoursAgo(4), zone))
  await page.getByRole('button', { name: 'Receive the sample' }).click()
  await expect(field('Received')).toContainText('Received before it was collected: check both times.')
  await expect(page.getByLabel('Collected by')).toHaveValue('Field round, wrong clock')
  await page.reload()
  await expect(page.getByText('What you had entered before is back in the form.')).toBeVisible()
  await expect(page.getByLabel('Collected by')).toHaveValue('Field round, wrong clock')
  await page.getByRole('button', { name: 'Start afresh' }).click()
})

test('a form submitted twice makes one sample', async ({ as, apiOf }) => {
  const technician = accountOf('technician', 1)
  const api = await apiOf(technician)
  const { session } = await api.call(getSession, {})
  const page = await as(technician)
  await page.goto('/receiving/new')
  await fillForm(page, session?.timeZone ?? '')
  const remark = `Sent twice ${randomUUID()}`
  await page.getByLabel('Remarks').fill(remark)
  const bodies: string[] = []
  page.on('request', (request) => {
    if (request.method() === 'POST' && request.url().endsWith('/api/samples')) {
      bodies.push(request.postData() ?? '')
    }
  })
  await page.getByRole('button', { name: 'Receive the sample' }).dblclick()
  const heading = page.getByRole('heading', { level: 2, name: /^S-\d\d-\d+$/ })
  await expect(heading).toBeVisible()
  expect(bodies).toHaveLength(1)
  // and the same form sent once more past the page is the same sample
  const again = await page.request.post('/api/samples', {
    headers: { 'x-weirlight': '1', 'content-type': 'application/json' },
    data: bodies[0] ?? '',
  })
  expect(await again.json()).toMatchObject({ number: await heading.innerText() })
  const { pointId } = JSON.parse(bodies[0] ?? '') as { pointId: string }
  const { items } = await api.call(listSamples, { query: { pointId, limit: 50 } })
  const views = await Promise.all(items.map(({ id }) => api.call(getSample, { params: { id } })))
  expect(views.filter((each) => each.remarks === remark)).toHaveLength(1)
})
