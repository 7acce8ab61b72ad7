import { accountOf } from '../support/accounts.js'
import { cell } from '../support/calibrating.js'
import { endSession } from '../support/database.js'
import { runGrid } from '../support/running.js'
import { openedIronBatch, savedAbsorbances } from '../support/set-up.js'
import { expect, test } from '../support/test.js'

test('a session that runs out over a half-filled grid: signed in again in place, nothing lost', async ({
  as,
  apiOf,
}) => {
  const technician = accountOf('technician', 1)
  const api = await apiOf(technician)
  const batch = await openedIronBatch(api)
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
  await expect.poll(() => savedAbsorbances(api, batch.id)).toEqual(['0.0009', '0.0011', '0.3939', '0.3951'])
  for (const [row, text] of ['0.0011', '0.3951', '0.0009', '0.3939'].entries()) {
    await expect(cell(grid, row, 0)).toHaveValue(text)
  }
})
