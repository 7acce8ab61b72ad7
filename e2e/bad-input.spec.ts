import {
  getBatch,
  getSample,
  getSession,
  listSamples,
  previewManifest,
  previewReadings,
  receiveSample,
  returnBatch,
  startCalibration,
  submitBatch,
} from '@weirlight/shared/contracts'
import { randomUUID } from 'node:crypto'
import { readFileSync, writeFileSync } from 'node:fs'
import type { Page } from '@playwright/test'
import { accountOf } from './support/accounts.js'
import { cell } from './support/calibrating.js'
import { endSession } from './support/database.js'
import { pasteInto, runGrid } from './support/running.js'
import { acceptedSample, methodId, openedBatch, pointOf, submittedBatch } from './support/set-up.js'
import { expect, test } from './support/test.js'
import { hoursAgo, laboratoryTime } from './support/times.js'

const fixture = (path: string) => readFileSync(new URL(`../fixtures/import/${path}`, import.meta.url))
const xlsx = 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet'
const iron = { client: 'AV', point: 'AV-05', method: 'fe-phenanthroline' }

test('readings that cannot be: each cell says why, keeps what was typed, and the others are saved', async ({
  as,
  apiOf,
}) => {
  const technician = accountOf('technician')
  const api = await apiOf(technician)
  const batch = await openedBatch(api, { method: iron.method, samples: [await acceptedSample(api, iron)] })
  const page = await as(technician)
  await page.goto(`/batches/${batch.id}`)
  const grid = runGrid(page)
  const typed = ['99', '0.12O', '0,123', '0.0013', '-2', '0.3941']
  await cell(grid, 0, 0).focus()
  for (const text of typed) {
    await page.keyboard.insertText(text)
    await page.keyboard.press('Enter')
  }
  await expect(grid).toContainText('A₁: The absorbance must lie between -0.5 and 4.')
  await expect(grid).toContainText('A₁: “0.12O” is not a number.')
  await expect(grid).toContainText('A₁: Use a decimal point: 0.123.')
  for (const [row, text] of typed.entries()) await expect(cell(grid, row, 0)).toHaveValue(text)
  for (const row of [0, 1, 2, 4]) await expect(cell(grid, row, 0)).toHaveAttribute('aria-invalid', 'true')
  await expect
    .poll(async () => {
      const { rows } = await api.call(getBatch, { params: { id: batch.id } })
      return rows.flatMap((row) => row.readings.map((reading) => reading.absorbance)).toSorted()
    })
    .toEqual(['0.0013', '0.3941'])

  // still there when the page is opened again, and mended in place
  await page.reload()
  await expect(cell(grid, 0, 0)).toHaveValue('99')
  await cell(grid, 0, 0).fill('0.0009')
  await page.keyboard.press('Enter')
  await expect(cell(grid, 0, 0)).toHaveAttribute('aria-invalid', 'false')
  await expect
    .poll(async () => (await api.call(getBatch, { params: { id: batch.id } })).read)
    .toBeGreaterThanOrEqual(0)

  // what is not complete is not sent off
  await page.getByRole('button', { name: 'Submit for review' }).click()
  await expect(page.getByText('These cells have no reading:')).toBeVisible()
  const refused = await api.send(submitBatch, {
    params: { id: batch.id },
    body: { version: (await api.call(getBatch, { params: { id: batch.id } })).version },
  })
  expect(refused.status).toBe(409)
})

test('a block that does not fit: what had no cell is named', async ({ as, apiOf }) => {
  const technician = accountOf('technician', 1)
  const api = await apiOf(technician)
  const batch = await openedBatch(api, { method: iron.method, samples: [await acceptedSample(api, iron)] })
  const page = await as(technician)
  await page.goto(`/batches/${batch.id}`)
  await expect(cell(runGrid(page), 0, 0)).toBeVisible()
  await pasteInto(page, '0.1001\t0.1002\t0.9999', { row: batch.rows.length - 1, column: 0 })
  await expect(page.getByRole('alert')).toContainText('One pasted value had no cell and was left out: 0.9999')
  await expect(cell(runGrid(page), batch.rows.length - 1, 1)).toHaveValue('0.1002')
})

test('a calibration with a missing standard is not submitted, and says what is missing where', async ({
  as,
  apiOf,
}) => {
  const technician = accountOf('technician', 2)
  const api = await apiOf(technician)
  const instruments = await api.file('/api/instruments')
  const [instrument] = (JSON.parse(instruments.toString()) as { items: { id: string }[] }).items
  const standard = (concentration: string, readings: string[]) => ({
    role: 'standard' as const,
    concentration,
    lotId: null,
    leftOutReason: '',
    readings,
  })
  const draft = await api.call(startCalibration, {
    body: {
      draftId: randomUUID(),
      methodId: await methodId(api, iron.method),
      instrumentId: instrument?.id ?? '',
      cellPathCm: '2',
      stockLotId: null,
      reagentLotIds: [],
      model: 'linear',
      weighting: 'none',
      colourStartedAt: null,
      temperatureC: '',
      note: '',
      // constructed: about 0.39 A per mg/L in 2 cm
      standards: [
        standard('0', ['0.0010']),
        standard('0.05', ['0.0205']),
        standard('0.5', ['0.1960']),
        standard('1', ['']),
      ],
    },
  })
  const page = await as(technician)
  await page.goto(`/calibrations/${draft.id}`)
  await page.getByRole('button', { name: 'Submit for signature' }).click()
  await page.getByRole('dialog').getByRole('button', { name: 'Submit', exact: true }).click()
  const dialog = page.getByRole('dialog')
  await expect(dialog.getByRole('alert').first()).toBeVisible()
  await dialog.getByRole('button', { name: 'Cancel' }).click()
  const main = page.getByRole('main')
  await expect(main).toContainText('At least 5 standards above zero are needed; there are 2.')
  await expect(main).toContainText('Choose the lot the standards were made from')
  await expect(main).toContainText(/1 mg\/L.* was not read/)
  await expect(page.getByText('Draft', { exact: true }).first()).toBeVisible()
})

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
  const refused = await api.send(receiveSample, {
    body: {
      ...(await pointOf(api, iron)),
      draftId: randomUUID(),
      purpose: 'operational',
      kind: 'routine',
      collectedAt: hoursAgo(1).toISOString(),
      collectedBy: 'Field round',
      receivedAt: hoursAgo(4).toISOString(),
      preservation: 'nitric-acid',
      ph: '1.6',
      temperatureC: '5',
      container: 'plastic',
      filteredInField: false,
      condition: '',
      remarks: '',
      determinations: [{ methodId: await methodId(api, iron.method) }],
    },
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

test('files that cannot be taken: empty, too large, mislabelled, old, an unknown column', async ({
  as,
  apiOf,
}, testInfo) => {
  const technician = accountOf('technician', 2)
  const api = await apiOf(technician)
  const before = (await api.call(listSamples, { query: { limit: 1 } })).items[0]?.number
  const page = await as(technician)
  await page.goto('/receiving/manifest')
  const file = page.getByLabel(/a file of samples|another file/i)
  const choose = (name: string, buffer: Buffer, mimeType = 'text/csv') =>
    file.setInputFiles({ name, mimeType, buffer })
  const alert = page.getByRole('alert')

  await choose('empty.csv', Buffer.alloc(0))
  await expect(alert).toContainText('“empty.csv” is empty.')
  await choose('manifest-empty.csv', fixture('not-ok/manifest-empty.csv'))
  await expect(alert).toContainText(/no rows|empty/)
  // too large to hand over in memory
  const huge = testInfo.outputPath('huge.csv')
  writeFileSync(huge, Buffer.alloc(50 * 1024 * 1024, 'x'))
  await file.setInputFiles(huge)
  await expect(alert).toContainText('“huge.csv” has 50 MB; at most 2 MB can be loaded.')
  await choose('manifest.xlsx', fixture('not-ok/manifest-named-wrongly.xlsx'), xlsx)
  await expect(alert).toContainText('The file is named .xlsx but its content is plain text.')
  await choose('manifest.xls', fixture('not-ok/manifest-old-format.xls'))
  await expect(alert).toContainText('This is an old or protected spreadsheet (xls).')
  await choose('manifest.csv', fixture('not-ok/manifest-unknown-column.csv'))
  const preview = page.getByRole('region', { name: 'Preview of samples' })
  await expect(preview).toContainText('The column “Weather” is not known here.')
  await expect(page.getByRole('button', { name: /^Receive/ })).toBeDisabled()
  await choose('manifest.csv', fixture('not-ok/manifest-bad-values.csv'))
  await expect(preview.getByText('bad row').or(preview.locator('td .state.is-above')).first()).toBeVisible()

  // the server alone says the same, whatever a page lets through
  for (const path of [previewManifest.path, previewReadings.path.replace(':id', '1')]) {
    const refused = await page.request.post(`/api${path}`, {
      headers: { 'x-weirlight': '1' },
      multipart: {
        file: { name: 'huge.csv', mimeType: 'text/csv', buffer: Buffer.alloc(50 * 1024 * 1024, 'x') },
      },
    })
    expect(refused.status()).toBe(413)
    expect(await refused.json()).toMatchObject({
      code: 'upload-too-large',
      detail: 'The file is larger than 2 MB. Send the readings alone, or in parts.',
    })
  }
  const after = (await api.call(listSamples, { query: { limit: 1 } })).items[0]?.number
  expect(Number(after?.slice(5))).toBeGreaterThanOrEqual(Number(before?.slice(5)))
})

test('a file of readings with bad rows or a decimal comma enters nothing', async ({ as, apiOf }) => {
  const technician = accountOf('technician')
  const api = await apiOf(technician)
  const batch = await openedBatch(api, { method: iron.method, samples: [await acceptedSample(api, iron)] })
  const page = await as(technician)
  await page.goto(`/batches/${batch.id}/upload`)
  const choose = (name: string) =>
    page
      .getByLabel(/a file of readings|another file/i)
      .setInputFiles({ name, mimeType: 'text/csv', buffer: fixture(`not-ok/${name}`) })
  const preview = page.getByRole('region', { name: 'Preview of readings' })
  await choose('readings-bad-rows.csv')
  await expect(preview).toContainText('This batch has no position “44”.')
  await expect(preview).toContainText('Position 1 stands in row')
  await expect(preview).toContainText('O.1971')
  await expect(page.getByRole('button', { name: /^Enter/ })).toBeDisabled()
  await choose('readings-decimal-comma.csv')
  await expect(preview).toContainText(/Use a decimal point: 0\.3940/)
  await choose('readings-unknown-columns.csv')
  await expect(preview).toContainText('The column “Temp” is not known here.')
  const { rows } = await api.call(getBatch, { params: { id: batch.id } })
  expect(rows.flatMap((row) => row.readings)).toEqual([])
})

test('two people in one batch: both keep their cells, and one cell is asked about', async ({ as, apiOf }) => {
  const first = accountOf('technician')
  const second = accountOf('technician', 1)
  const api = await apiOf(first)
  const batch = await openedBatch(api, { method: iron.method, samples: [await acceptedSample(api, iron)] })
  const [mine, theirs] = [await as(first), await as(second)]
  for (const page of [mine, theirs]) {
    await page.goto(`/batches/${batch.id}`)
    await expect(cell(runGrid(page), 0, 0)).toBeVisible()
  }
  const enter = async (page: Page, row: number, text: string) => {
    await cell(runGrid(page), row, 0).fill(text)
    await page.keyboard.press('Enter')
  }
  // the first page hears nothing of the other until it sends its own
  await mine.route('**/api/batches/*', (route) =>
    route.request().method() === 'GET' ? route.abort() : route.continue(),
  )
  await enter(theirs, 1, '0.3950')
  await expect(theirs.getByText(/^1 reading is saved|All 1 readings|saved/i).first()).toBeVisible()
  await expect
    .poll(async () => {
      const { rows } = await api.call(getBatch, { params: { id: batch.id } })
      return rows.flatMap((row) => row.readings).length
    })
    .toBe(1)
  await enter(mine, 1, '0.4444')
  await enter(mine, 2, '0.0011')
  await mine.unroute('**/api/batches/*')
  const question = mine.getByRole('alert').filter({ hasText: 'You entered 0.4444' })
  await expect(question).toContainText(`${second.name} entered 0.3950`)
  await expect
    .poll(async () => {
      const { rows } = await api.call(getBatch, { params: { id: batch.id } })
      return rows.flatMap((row) => row.readings.map((reading) => reading.absorbance)).toSorted()
    })
    .toEqual(['0.0011', '0.3950'])
  await question.getByRole('button', { name: 'Keep 0.3950' }).click()
  await expect(cell(runGrid(mine), 1, 0)).toHaveValue('0.3950')
  await expect(theirs.getByText(`${first.name} is looking at this batch.`)).toBeVisible()
})

test('a decision on what somebody else has changed meanwhile is refused and says who', async ({
  as,
  apiOf,
}) => {
  const technician = accountOf('technician', 2)
  const manager = accountOf('qa-manager')
  const other = accountOf('qa-manager', 1)
  const api = await apiOf(technician)
  const sample = await acceptedSample(api, iron)
  const batch = await submittedBatch(api, {
    method: iron.method,
    samples: [sample],
    truth: { [sample.number]: 0.2 },
  })
  const page = await as(manager)
  await page.goto(`/review/batches/${batch.id}`)
  await page.getByRole('button', { name: 'Release with signature' }).click()
  const dialog = page.getByRole('dialog')
  await dialog.getByLabel('Your passphrase').fill(manager.passphrase)
  const otherApi = await apiOf(other)
  await otherApi.call(returnBatch, {
    params: { id: batch.id },
    body: { version: batch.version, reason: 'Read the duplicate again.' },
  })
  await dialog.getByRole('button', { name: 'Release', exact: true }).click()
  await expect(dialog.getByRole('alert')).toContainText(/changed|sent back/)
  expect((await api.call(getBatch, { params: { id: batch.id } })).state).toBe('returned')
})

test('a session that runs out over a half-filled grid: signed in again in place, nothing lost', async ({
  as,
  apiOf,
}) => {
  const technician = accountOf('technician', 1)
  const api = await apiOf(technician)
  const batch = await openedBatch(api, { method: iron.method, samples: [await acceptedSample(api, iron)] })
  const page = await as(technician, { isFresh: true })
  await page.goto(`/batches/${batch.id}`)
  const grid = runGrid(page)
  await cell(grid, 0, 0).fill('0.0011')
  await page.keyboard.press('Enter')
  await expect(page.getByText(/saved/).first()).toBeVisible()
  await endSession(page)
  for (const [row, text] of ['', '0.3951', '0.0009', '0.3939'].entries()) {
    if (text === '') continue
    await cell(grid, row, 0).fill(text, { force: true })
    await page.keyboard.press('Enter')
  }
  const dialog = page.getByRole('dialog', { name: 'Please sign in again' })
  await expect(dialog).toContainText('Nothing you entered is lost')
  await dialog.getByLabel('Passphrase').fill(technician.passphrase)
  await dialog.getByRole('button', { name: 'Sign in' }).click()
  await expect(dialog).toBeHidden()
  await expect
    .poll(async () => {
      const { rows } = await api.call(getBatch, { params: { id: batch.id } })
      return rows.flatMap((row) => row.readings.map((reading) => reading.absorbance)).toSorted()
    })
    .toEqual(['0.0009', '0.0011', '0.3939', '0.3951'])
  for (const [row, text] of ['0.0011', '0.3951', '0.0009', '0.3939'].entries()) {
    await expect(cell(grid, row, 0)).toHaveValue(text)
  }
})
