import { addMaterial } from '@weirlight/shared/contracts'
import { paths } from '@weirlight/shared/paths'
import { accountOf } from './support/accounts.js'
import { expect, test } from './support/test.js'

test('an empty bottle is recorded as used up and offered no more', async ({ as, apiOf }) => {
  const account = accountOf('technician')
  const lot = await (
    await apiOf(account)
  ).call(addMaterial, {
    body: {
      kind: 'reagent',
      name: 'Buffer to be emptied',
      analyte: null,
      concentration: null,
      uncertainty: null,
      lotCode: '',
      producer: '',
      certificateRef: '',
      receivedOn: '2026-01-05',
      openedOn: null,
      expiresOn: '2036-01-05',
      parentId: null,
      recipe: '',
      storage: '',
      hazards: '',
    },
  })
  const page = await as(account)
  await page.goto(paths.material(lot.id))
  await page.getByRole('button', { name: 'Used up', exact: true }).click()
  const dialog = page.getByRole('dialog')
  await expect(dialog).toContainText('cannot be chosen for a calibration or a batch')
  await dialog.getByRole('button', { name: 'Record it' }).click()
  await expect(dialog).toBeHidden()
  await expect(page.getByText('used up', { exact: true }).first()).toBeVisible()
  await expect(page.getByRole('button', { name: 'Used up', exact: true })).toHaveCount(0)
  await expect(page.getByRole('button', { name: 'Take out of use' })).toBeVisible()
})
