import type { Page } from '@playwright/test'
import { getBatch, returnBatch } from '@weirlight/shared/contracts'
import { accountOf } from '../support/accounts.js'
import { cell } from '../support/calibrating.js'
import { runGrid } from '../support/running.js'
import {
  acceptedSample,
  ironPoint,
  openedIronBatch,
  savedAbsorbances,
  submittedBatch,
} from '../support/set-up.js'
import { expect, test } from '../support/test.js'

test('two people in one batch: both keep their cells, and one cell is asked about', async ({ as, apiOf }) => {
  const first = accountOf('technician')
  const second = accountOf('technician', 1)
  const api = await apiOf(first)
  const batch = await openedIronBatch(api)
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
  await expect.poll(() => savedAbsorbances(api, batch.id)).toEqual(['0.3950'])
  await enter(mine, 1, '0.4444')
  await enter(mine, 2, '0.0011')
  await mine.unroute('**/api/batches/*')
  const question = mine.getByRole('alert').filter({ hasText: 'You entered 0.4444' })
  await expect(question).toContainText(`${second.name} entered 0.3950`)
  await expect.poll(() => savedAbsorbances(api, batch.id)).toEqual(['0.0011', '0.3950'])
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
  const sample = await acceptedSample(api, ironPoint)
  const batch = await submittedBatch(api, {
    method: ironPoint.method,
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
