import { readFileSync, writeFileSync } from 'node:fs'
import { listSamples, previewManifest, previewReadings } from '@weirlight/shared/contracts'
import { accountOf } from '../support/accounts.js'
import { openedIronBatch, savedAbsorbances } from '../support/set-up.js'
import { expect, test } from '../support/test.js'

const fixture = (path: string) => readFileSync(new URL(`../../fixtures/import/${path}`, import.meta.url))
const xlsx = 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet'

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
  const batch = await openedIronBatch(api)
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
  expect(await savedAbsorbances(api, batch.id)).toEqual([])
})
