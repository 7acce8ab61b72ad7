import {
  getBatch,
  getMethod,
  getSession,
  listMethods,
  returnBatch,
  type BatchView,
} from '@weirlight/shared/contracts'
import type { Page } from '@playwright/test'
import { accountByEmail, accountOf, type Account } from './support/accounts.js'
import type { Api } from './support/api.js'
import {
  calibrationNumber,
  expectLine,
  giveReason,
  openFromToday,
  saved,
  shownOf,
  sign,
  startCalibration,
  submitCalibration,
  typeStandards,
} from './support/calibrating.js'
import { mailbox } from './support/mailbox.js'
import { expectedSlope, leastSquares, type Line } from './support/numbers.js'
import { readPdf } from './support/pdf.js'
import { accept, receive } from './support/receiving.js'
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
} from './support/running.js'
import { expect, test } from './support/test.js'
import { laboratoryTime } from './support/times.js'

interface Metal {
  name: string
  methodCode: string
  methodTitle: string
  determination: string
  wavelengthNm: number
  cellPathCm: string
  reagents: string[]
  colourMinutes: number
  preservation: 'None' | 'Nitric acid'
  ph: string
  temperatureC: string
  client: { label: string; person: string; alertsTo: string; certificatesTo: string }
  /** true concentrations, mg/L: constructed, one on each side of the limit */
  below: { point: string; mgPerL: number }
  above: { point: string; mgPerL: number; limit: string }
  /** how the readings get into the run sheet */
  entered: 'typed' | 'pasted' | 'xlsx' | 'csv'
  technician: number
  isSentBackFirst?: boolean
}

const METALS: Metal[] = [
  {
    name: 'iron',
    methodCode: 'fe-phenanthroline',
    methodTitle: 'Iron by 1,10-phenanthroline',
    determination: 'Iron, total',
    wavelengthNm: 510,
    cellPathCm: '1',
    reagents: ['1,10-phenanthroline solution', 'Acetate buffer'],
    colourMinutes: 20,
    preservation: 'Nitric acid',
    ph: '1.6',
    temperatureC: '5.0',
    client: {
      label: 'PH · Pellam Hills Water Board',
      person: 'dora.whitlock@pellamhills.example',
      alertsTo: 'operations@pellamhills.example',
      certificatesTo: 'dora.whitlock@pellamhills.example',
    },
    below: { point: 'PH-03 · Well 3', mgPerL: 0.18 },
    above: { point: 'PH-05 · Well 5', mgPerL: 0.62, limit: '0.3' },
    entered: 'typed',
    technician: 0,
    isSentBackFirst: true,
  },
  {
    name: 'copper',
    methodCode: 'cu-bathocuproine',
    methodTitle: 'Copper by bathocuproine disulfonate',
    determination: 'Copper, total',
    wavelengthNm: 484,
    cellPathCm: '1',
    reagents: ['Bathocuproine disulfonate solution', 'Citrate buffer'],
    colourMinutes: 15,
    preservation: 'Nitric acid',
    ph: '1.7',
    temperatureC: '6.0',
    client: {
      label: 'TH · Thistle Heights Metropolitan District',
      person: 'callum.reyes@thistleheights.example',
      alertsTo: 'control@thistleheights.example',
      certificatesTo: 'callum.reyes@thistleheights.example',
    },
    below: { point: 'TH-01 · Summit works outlet', mgPerL: 0.41 },
    above: { point: 'TH-02 · Parade tap', mgPerL: 1.72, limit: '1.3' },
    entered: 'pasted',
    technician: 1,
  },
  {
    name: 'manganese',
    methodCode: 'mn-persulfate',
    methodTitle: 'Manganese by persulfate oxidation to permanganate',
    determination: 'Manganese, total',
    wavelengthNm: 525,
    cellPathCm: '5',
    reagents: ['Silver and mercury reagent', 'Ammonium persulfate'],
    colourMinutes: 30,
    preservation: 'Nitric acid',
    ph: '1.5',
    temperatureC: '5.5',
    client: {
      label: 'DM · Dunmarrow District Water',
      person: 'silas.penrose@dunmarrow.example',
      alertsTo: 'duty@dunmarrow.example',
      certificatesTo: 'silas.penrose@dunmarrow.example',
    },
    below: { point: 'DM-02 · North borehole', mgPerL: 0.02 },
    above: { point: 'DM-01 · Works outlet', mgPerL: 0.21, limit: '0.05' },
    entered: 'xlsx',
    technician: 2,
  },
  {
    name: 'chromium(VI)',
    methodCode: 'cr6-diphenylcarbazide',
    methodTitle: 'Chromium(VI) by 1,5-diphenylcarbazide',
    determination: 'Chromium(VI)',
    wavelengthNm: 540,
    cellPathCm: '1',
    reagents: ['1,5-diphenylcarbazide in acetone'],
    colourMinutes: 6,
    preservation: 'None',
    ph: '7.4',
    temperatureC: '4.0',
    client: {
      label: 'KR · Keld River Treatment Company',
      person: 'odile.farrant@keldriver.example',
      alertsTo: 'process@keldriver.example',
      certificatesTo: 'odile.farrant@keldriver.example',
    },
    below: { point: 'KR-03 · After filters', mgPerL: 0.04 },
    above: { point: 'KR-01 · Intake', mgPerL: 0.23, limit: '0.1' },
    entered: 'csv',
    technician: 1,
  },
]

/** How much of a number two computations must share. */
const CLOSE = 10

async function methodOf(api: Api, metal: Metal) {
  const { items } = await api.call(listMethods, {})
  const row = items.find((each) => each.code === metal.methodCode)
  if (!row) throw new Error(`There is no method ${metal.methodCode}.`)
  const method = await api.call(getMethod, { params: { id: row.id } })
  const { value: molarAbsorptivity } = method.definition['molarAbsorptivity'] as { value: number }
  // as a real reagent gives it: a little under the published value, constructed
  const slope =
    0.985 *
    expectedSlope({
      molarAbsorptivity,
      molarMass: method.molarMass,
      cellPathCm: Number(metal.cellPathCm),
    })
  return { ...method, slope }
}

/** What the steps of one metal hand on to each other. */
interface Way {
  metal: Metal
  technician: Account
  manager: Account
  client: Account
  bench: Api
  timeZone: string
  slope: number
  molarMass: number
  /** numbers of the two samples, below and above the limit */
  low: string
  high: string
}

/** Typed, judged as it is typed, kept. */
async function calibrate(
  page: Page,
  { metal, slope, molarMass }: Way,
): Promise<{ number: string; line: Line }> {
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
  return { number, line }
}

/** Sent back once with a reason: the technician reads it on Today and starts over from a copy. */
async function sendBackOnce(pages: { bench: Page; desk: Page }, number: string): Promise<void> {
  const reason = 'The second source was read without its own blank; read both again.'
  await giveReason(pages.desk, { open: 'Send back', act: 'Send back', reason })
  await expect(pages.desk.getByText('Sent back').first()).toBeVisible()
  await openFromToday(pages.bench, number)
  await expect(pages.bench.getByText(reason).first()).toBeVisible()
  await pages.bench.getByRole('button', { name: 'Start over from a copy' }).click()
  await expect(pages.bench.getByRole('heading', { level: 1 })).not.toContainText(number)
}

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

async function answerAlert(page: Page, way: Way, reported: string): Promise<void> {
  const { metal, high, manager, client } = way
  const about = new RegExp(`^Alert A-[\\s\\S]*${high}`)
  const mail = await mailbox.read({ to: metal.client.alertsTo, about })
  expect(mail.text).toContain(`${metal.determination} ${reported} mg/L`)
  expect(mail.text).toContain(`${metal.above.limit} mg/L`)
  expect(mail.text).toContain('not a determination of compliance')
  await mailbox.read({ to: manager.email, about })

  await page.goto(mailbox.link(mail, /https?:\/\/\S+\/our\/alerts\/\d+/))
  await expect(page.getByRole('heading', { level: 1 })).toContainText(
    `${metal.determination} ${reported} mg/L`,
  )
  await page.getByRole('button', { name: 'I have seen this' }).click()
  const dialog = page.getByRole('dialog')
  await dialog.getByLabel(/A note to the laboratory/).fill('The duty operator has shut the valve.')
  await dialog.getByRole('button', { name: 'I have seen this' }).click()
  await expect(page.getByText('Acknowledged', { exact: true }).first()).toBeVisible()
  await expect(page.getByText(`by ${client.name}`).first()).toBeVisible()
}

/** @returns the certificate's number */
async function readCertificate(page: Page, way: Way, batch: BatchView): Promise<string> {
  const { metal, high, client, manager, technician } = way
  const mail = await mailbox.read({
    to: metal.client.certificatesTo,
    about: new RegExp(`^Certificate of analysis C-[^\\n]*${high}`),
  })
  const attached = await mailbox.attachment(mail, 'application/pdf')
  const number = /C-\d\d-\d+/.exec(mail.subject)?.[0] ?? ''

  await page.goto('/our/certificates')
  await page.getByRole('link', { name: new RegExp(`${number}, `) }).click()
  await expect(page.getByRole('heading', { level: 1 })).toHaveText(`Certificate ${number}`)
  const [download] = await Promise.all([
    page.waitForEvent('download'),
    page.getByRole('link', { name: 'Download' }).click(),
  ])
  const file = await download.createReadStream()
  const chunks: Buffer[] = []
  for await (const chunk of file) chunks.push(chunk as Buffer)
  const document = await readPdf(Buffer.concat(chunks))
  expect(document.sha256, 'the mailed and the downloaded document are one').toBe(
    (await readPdf(attached)).sha256,
  )
  const hash = await page.locator('.hash').innerText()
  expect(hash.replaceAll(/\s/g, '').toLowerCase()).toBe(document.sha256)

  const line = page.getByRole('listitem').filter({ hasText: metal.determination }).first()
  const shown = await line.locator('.own-number > span').first().innerText()
  const row = batch.rows.find((each) => each.sampleNumber === high && each.kind === 'sample')
  const { reportedText, uncertaintyText } = row?.assessment ?? {}
  expect(shown).toBe(`${reportedText ?? ''} mg/L`)
  for (const words of [
    number,
    metal.client.label.split(' · ')[1] ?? '',
    high,
    metal.above.point.split(' · ')[1] ?? '',
    metal.determination,
    metal.methodTitle,
    reportedText ?? '',
    (uncertaintyText ?? '').replace(/^±\s*/, ''),
    `${metal.above.limit} mg/L`,
    'above',
    manager.name,
    technician.name,
    'R. Amble, field round',
    'Page 1 of 1',
    await page.locator('p.note').last().innerText(),
  ]) {
    expect(squeezed(document.text)).toContain(squeezed(words))
  }

  const others = await page.request.get('/api/certificates/1')
  const own = (await page.request.get('/api/certificates').then((answer) => answer.json())) as {
    items: { id: string; clientName: string }[]
  }
  expect(new Set(own.items.map((each) => each.clientName))).toEqual(
    new Set([metal.client.label.split(' · ')[1]]),
  )
  if (!own.items.some((each) => each.id === '1')) expect(others.status()).toBe(404)
  expect(client.role).toBe('client')
  return number
}

/** A narrow column breaks its lines where it must. */
const squeezed = (text: string) => text.replaceAll(/\s/g, '')

interface Audited {
  api: Api
  calibration: string
  certificate: string
  batch: BatchView
  reported: string
}

async function audit(page: Page, way: Way, given: Audited): Promise<void> {
  const { metal, technician, manager, client, high } = way
  const { batch, calibration, certificate, reported } = given
  const entries = page.getByRole('table', { name: 'History, newest first' })
  const lines = (words: string) => entries.getByRole('row').filter({ hasText: words })
  const filters = page.getByRole('search').filter({ has: page.getByLabel('Person') })
  // a label around its select carries the words of every option as well
  const narrow = (label: string, option: string) =>
    filters
      .locator('label', { hasText: new RegExp(`^${label}`) })
      .getByRole('combobox')
      .selectOption({ label: option })

  // every step: who, when, what was done
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
    await expect(line).toContainText(laboratoryTime(new Date(), way.timeZone).slice(0, 10))
  }
  if (metal.isSentBackFirst) {
    await filters.getByLabel('Number').fill('')
    await narrow('What was done', 'Sent a calibration back')
    await expect(lines('read without its own blank').first()).toContainText(manager.name)
  }

  // by person, thing and day
  await page.goto('/history')
  await narrow('Person', client.name)
  await narrow('Thing', 'Alert')
  await expect(lines('Acknowledged an alert').first()).toContainText('The duty operator has shut the valve.')
  await expect(lines(technician.name)).toHaveCount(0)
  const today = laboratoryTime(new Date(), way.timeZone).slice(0, 10)
  await filters.getByLabel('From day').fill(today)
  await expect(lines('Acknowledged an alert').first()).toBeVisible()
  await filters.getByLabel('From day').fill('')
  await filters.getByLabel('To day').fill('2020-01-01')
  await expect(page.getByText('No entry fits')).toBeVisible()

  // old and new side by side
  await page.goto(`/history?number=${batch.number}&thing=batches`)
  await lines('Released a batch').first().getByRole('button').first().click()
  await expect(entries.locator('.history-details')).toContainText('released')

  // from the certificate's number to everything behind it
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
  const position = batch.rows.find((row) => row.sampleNumber === high && row.kind === 'sample')
  for (const reading of position?.readings ?? []) {
    await expect(page.getByRole('region', { name: 'Readings' })).toContainText(reading.absorbance)
  }
  await expect(page.getByRole('link', { name: calibration }).first()).toBeVisible()
  await expect(page.getByRole('region', { name: 'Standards' }).getByRole('row')).not.toHaveCount(1)
  await expect(page.getByRole('region', { name: 'Lots' })).toContainText('stock')

  await expectNoHand(page, given, batch)
}

/** Nothing to press that changes anything, and nothing that could be sent past the page. */
async function expectNoHand(page: Page, { api }: Audited, batch: BatchView): Promise<void> {
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

for (const metal of METALS) {
  test(`${metal.name}: from the bottle to the certificate`, async ({ as, apiOf }) => {
    const technician = accountOf('technician', metal.technician)
    const manager = accountOf('qa-manager', metal.technician % 2)
    const client = accountByEmail(metal.client.person)
    const bench = await apiOf(technician)
    const { session } = await bench.call(getSession, {})
    const method = await methodOf(bench, metal)
    const way: Way = {
      ...{ metal, technician, manager, client, bench, low: '', high: '' },
      timeZone: session?.timeZone ?? '',
      slope: method.slope,
      molarMass: method.molarMass,
    }
    const atBench = await as(technician)
    const atDesk = await as(manager)
    const atClient = await as(client)

    await test.step('1. the technician receives samples', async () => {
      const bottle = {
        ...metal,
        client: metal.client.label,
        collectedBy: 'R. Amble, field round',
        timeZone: way.timeZone,
      }
      way.low = await receive(atBench, { ...bottle, point: metal.below.point })
      await accept(atBench)
      await atBench.getByRole('button', { name: 'Receive another from this client' }).click()
      way.high = await receive(atBench, { ...bottle, point: metal.above.point }, { isNext: true })
      await accept(atBench)
      expect(way.high).not.toBe(way.low)
    })

    const calibration =
      await test.step('2. and 3. a calibration: typed, submitted, signed by another', async () => {
        await startCalibration(atBench, metal)
        let made = await calibrate(atBench, way)
        await submitCalibration(atBench)
        await openFromToday(atDesk, made.number)
        await expect(atDesk.getByText(technician.name).first()).toBeVisible()
        if (metal.isSentBackFirst) {
          await sendBackOnce({ bench: atBench, desk: atDesk }, made.number)
          made = await calibrate(atBench, way)
          await submitCalibration(atBench)
          await openFromToday(atDesk, made.number)
        }
        await sign(atDesk, { open: 'Sign for use', act: 'Sign for use', passphrase: manager.passphrase })
        await expect(atDesk.getByText('In force', { exact: true }).first()).toBeVisible()
        return made
      })

    const batch = await test.step('4. a batch from what waits, its readings, submitted', async () => {
      await openBatch(atBench, {
        methodTitle: metal.methodTitle,
        samples: [way.low, way.high],
        calibration: calibration.number,
        colourMinutes: metal.colourMinutes,
        timeZone: way.timeZone,
      })
      const id = batchIdIn(atBench)
      const opened = await bench.call(getBatch, { params: { id } })
      expect(new Set(opened.rows.map((row) => row.kind))).toEqual(
        new Set(['blank', 'verification', 'method-blank', 'control', 'sample', 'duplicate']),
      )
      await enterReadings(atBench, way, { opened, line: calibration.line })
      await submitBatch(atBench)
      return bench.call(getBatch, { params: { id } })
    })
    const reported = batch.rows.find((row) => row.sampleNumber === way.high)?.assessment.reportedText ?? ''

    await test.step('5. the QA manager reviews and releases with a signature', async () => {
      await openFromToday(atDesk, batch.number)
      const results = atDesk.getByRole('region', { name: 'Results as they would be reported' })
      const high = results.getByRole('row').filter({ hasText: way.high })
      await expect(high).toContainText(`above ${metal.above.limit}`)
      await expect(high).toContainText(reported)
      await expect(results.getByRole('row').filter({ hasText: way.low })).toContainText('below')
      await sign(atDesk, {
        open: 'Release with signature',
        act: 'Release',
        passphrase: manager.passphrase,
      })
      await expect(atDesk).toHaveURL(/\/review$/)
    })

    await test.step('6. the alert is mailed and acknowledged', () => answerAlert(atClient, way, reported))
    const certificate = await test.step('7. the certificate is mailed, downloaded and read', () =>
      readCertificate(atClient, way, batch))
    await test.step('8. the auditor follows it all back and can change nothing', async () => {
      const auditor = accountOf('auditor')
      await audit(await as(auditor), way, {
        api: await apiOf(auditor),
        calibration: calibration.number,
        certificate,
        batch,
        reported,
      })
    })
  })
}
