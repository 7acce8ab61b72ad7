import { getBatch, submitBatch } from '@weirlight/shared/contracts'
import { accountOf } from '../support/accounts.js'
import { cell } from '../support/calibrating.js'
import { pasteInto, runGrid } from '../support/running.js'
import { openedIronBatch, savedAbsorbances } from '../support/set-up.js'
import { expect, test } from '../support/test.js'

test('readings that cannot be: each cell says why, keeps what was typed, and the others are saved', async ({
  as,
  apiOf,
}) => {
  const technician = accountOf('technician')
  const api = await apiOf(technician)
  const batch = await openedIronBatch(api)
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
  await expect.poll(() => savedAbsorbances(api, batch.id)).toEqual(['0.0013', '0.3941'])

  // still there when the page is opened again, and mended in place
  await page.reload()
  await expect(cell(grid, 0, 0)).toHaveValue('99')
  await cell(grid, 0, 0).fill('0.0009')
  await page.keyboard.press('Enter')
  await expect(cell(grid, 0, 0)).toHaveAttribute('aria-invalid', 'false')
  await expect.poll(() => savedAbsorbances(api, batch.id)).toEqual(['0.0009', '0.0013', '0.3941'])

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
  const batch = await openedIronBatch(api)
  const page = await as(technician)
  await page.goto(`/batches/${batch.id}`)
  await expect(cell(runGrid(page), 0, 0)).toBeVisible()
  await pasteInto(page, '0.1001\t0.1002\t0.9999', { row: batch.rows.length - 1, column: 0 })
  await expect(page.getByRole('alert')).toContainText('One pasted value had no cell and was left out: 0.9999')
  await expect(cell(runGrid(page), batch.rows.length - 1, 1)).toHaveValue('0.1002')
})
