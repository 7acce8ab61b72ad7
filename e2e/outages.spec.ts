import { listAlerts, listCertificates, listMail } from '@weirlight/shared/contracts'
import { accountByEmail, accountOf } from './support/accounts.js'
import { cell } from './support/calibrating.js'
import { control } from './support/control.js'
import { mailbox } from './support/mailbox.js'
import { runGrid } from './support/running.js'
import { acceptedSample, openedBatch, release, submittedBatch } from './support/set-up.js'
import { expect, test } from './support/test.js'

// one plug at a time, and nobody else at work: see the configuration
test.describe.configure({ mode: 'serial' })

const iron = { client: 'PH', point: 'PH-05', method: 'fe-phenanthroline' }
/** mg/L, above the limit of 0.3: constructed */
const ABOVE = 0.71
const alertsTo = 'operations@pellamhills.example'
const patience = Number(process.env['E2E_PATIENCE'] ?? 1)

test.afterAll(async () => {
  // whatever a test did not come to
  if (!(await control.isApplicationUp())) await control.startApplication()
  await mailbox.list({ to: '', about: '' }).catch(() => control.startMail())
})

test('a mail server that is down: the release stands, the messages wait and are shown, then they leave', async ({
  as,
  apiOf,
}) => {
  const bench = await apiOf(accountOf('technician'))
  const manager = accountOf('qa-manager')
  const desk = await apiOf(manager)
  const sample = await acceptedSample(bench, iron)
  const batch = await submittedBatch(bench, {
    method: iron.method,
    samples: [sample],
    truth: { [sample.number]: ABOVE },
  })
  const page = await as(accountOf('administrator'))

  await control.killMail()
  try {
    const released = await release(desk, manager, batch)
    expect(released.state).toBe('released')
    const alert = (await desk.call(listAlerts, {})).items.find((each) => each.sampleNumber === sample.number)
    expect(alert).toBeDefined()

    // said where mail is looked after, with what the mail server answered
    await page.goto('/settings/mail?state=waiting')
    const line = page
      .getByRole('row')
      .filter({ hasText: alert?.number ?? '' })
      .filter({ hasText: alertsTo })
    await expect(line).toContainText('Waiting to leave')
    await expect(line).toContainText(/ECONNREFUSED|connect/)
    await page.goto('/settings/health')
    await expect(page.getByRole('main')).toContainText(/mail/i)

    // the alert itself stands, and the client can answer it without the message
    const client = await as(accountByEmail('dora.whitlock@pellamhills.example'))
    await client.goto('/our')
    await expect(client.getByRole('article', { name: `Alert ${alert?.number ?? ''}` })).toBeVisible()
  } finally {
    await control.startMail()
  }
  const mail = await mailbox.read({ to: alertsTo, about: sample.number, patienceMs: 120_000 })
  expect(mail.subject).toContain('Alert A-')
  await expect
    .poll(
      async () => {
        const { items } = await desk.call(listMail, { query: { limit: 200 } })
        return items.filter((each) => each.subject.includes(sample.number) && each.state !== 'sent').length
      },
      { timeout: 120_000 * patience },
    )
    .toBe(0)
})

test('the application killed between release and mail: alert and certificate leave once each', async ({
  apiOf,
}) => {
  const bench = await apiOf(accountOf('technician', 1))
  const manager = accountOf('qa-manager', 1)
  const desk = await apiOf(manager)
  const sample = await acceptedSample(bench, iron)
  const batch = await submittedBatch(bench, {
    method: iron.method,
    samples: [sample],
    truth: { [sample.number]: ABOVE },
  })
  // nothing can leave before the kill
  await control.killMail()
  await release(desk, manager, batch)
  await control.killApplication()
  expect(await control.isApplicationUp()).toBe(false)
  await control.startMail()
  await control.startApplication()

  const wanted = { to: alertsTo, about: sample.number, patienceMs: 180_000 }
  await mailbox.read({ ...wanted, about: new RegExp(`^Alert [\\s\\S]*${sample.number}`) })
  const certificate = await mailbox.read({
    ...wanted,
    about: new RegExp(`^Certificate of analysis [^\\n]*${sample.number}`),
  })
  expect(await mailbox.attachment(certificate, 'application/pdf')).not.toHaveLength(0)

  // the worker has nothing left to do for this sample; then each stands in the mailbox once
  await expect
    .poll(
      async () => {
        const { items } = await desk.call(listMail, { query: { limit: 200 } })
        return items.filter((each) => each.subject.includes(sample.number) && each.state !== 'sent').length
      },
      { timeout: 120_000 * patience },
    )
    .toBe(0)
  const all = await mailbox.list({ to: alertsTo, about: sample.number })
  expect(all.filter((each) => each.subject.startsWith('Alert'))).toHaveLength(1)
  expect(all.filter((each) => each.subject.startsWith('Certificate'))).toHaveLength(1)
  const certificates = (await desk.call(listCertificates, {})).items
  expect(certificates.filter((each) => each.sampleNumber === sample.number)).toHaveLength(1)
  const alerts = (await desk.call(listAlerts, {})).items
  expect(alerts.filter((each) => each.sampleNumber === sample.number)).toHaveLength(1)
})

test('the server gone in the middle of a run: typed on, kept, sent when it answers again', async ({
  as,
  apiOf,
}) => {
  const technician = accountOf('technician', 2)
  const bench = await apiOf(technician)
  const batch = await openedBatch(bench, {
    method: iron.method,
    samples: [await acceptedSample(bench, iron)],
  })
  const page = await as(technician)
  await page.goto(`/batches/${batch.id}`)
  const grid = runGrid(page)
  const texts = batch.rows.map((_, index) => (0.1 + index / 1000).toFixed(4))
  await expect(cell(grid, 0, 0)).toBeVisible()
  await control.killApplication()
  try {
    await cell(grid, 0, 0).focus()
    for (const text of texts) {
      await page.keyboard.insertText(text)
      await page.keyboard.press('Enter')
    }
    await expect(page.getByText('No connection').first()).toBeVisible()
    for (const [row, text] of texts.entries()) await expect(cell(grid, row, 0)).toHaveValue(text)
  } finally {
    await control.startApplication()
  }
  await expect(page.getByText('No connection')).toHaveCount(0, { timeout: 60_000 * patience })
  await page.reload()
  for (const [row, text] of texts.entries()) await expect(cell(grid, row, 0)).toHaveValue(text)
})
