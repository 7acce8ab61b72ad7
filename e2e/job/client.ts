import type { Page } from '@playwright/test'
import type { BatchView } from '@weirlight/shared/contracts'
import { mailbox } from '../support/mailbox.js'
import { readPdf } from '../support/pdf.js'
import { expect } from '../support/test.js'
import type { Way } from './way.js'

export async function answerAlert(page: Page, way: Way, reported: string): Promise<void> {
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
export async function readCertificate(page: Page, way: Way, batch: BatchView): Promise<string> {
  const { metal, high, manager, technician } = way
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

  await expectOnlyOwn(page, way)
  return number
}

/** Of other utilities the client sees no certificate. */
async function expectOnlyOwn(page: Page, { metal, client }: Way): Promise<void> {
  const others = await page.request.get('/api/certificates/1')
  const own = (await page.request.get('/api/certificates').then((answer) => answer.json())) as {
    items: { id: string; clientName: string }[]
  }
  expect(new Set(own.items.map((each) => each.clientName))).toEqual(
    new Set([metal.client.label.split(' · ')[1]]),
  )
  if (!own.items.some((each) => each.id === '1')) expect(others.status()).toBe(404)
  expect(client.role).toBe('client')
}

/** A narrow column breaks its lines where it must. */
const squeezed = (text: string) => text.replaceAll(/\s/g, '')
