import { AxeBuilder } from '@axe-core/playwright'
import type { Page } from '@playwright/test'
import { ROLES } from '@weirlight/shared/permissions'
import { accountOf } from './support/accounts.js'
import { areaOf, areasOf, findThings, publicScreens, screensOf, type Screen } from './support/screens.js'
import { settled } from './support/settled.js'
import { expect, test } from './support/test.js'

/** Violations of a screen that keep somebody out, in a line each. */
async function violations(page: Page): Promise<string[]> {
  const { violations: found } = await new AxeBuilder({ page })
    // the browser's own viewer of PDFs is not ours to mend
    .exclude('iframe.document-frame')
    .analyze()
  return found
    .filter((each) => each.impact === 'serious' || each.impact === 'critical')
    .map((each) => `${each.id}: ${each.help}: ${each.nodes.map((node) => node.target.join(' ')).join(', ')}`)
}

async function look(page: Page, screens: readonly Screen[]): Promise<void> {
  expect(screens.length).toBeGreaterThan(0)
  for (const screen of screens) {
    await test.step(screen.name, async () => {
      await page.goto(screen.path)
      await settled(page)
      expect.soft(await violations(page), `${screen.name} at ${screen.path}`).toEqual([])
    })
  }
}

for (const role of ROLES) {
  for (const area of areasOf(role)) {
    test(`nothing keeps a person out: ${role}, ${area}`, async ({ as, apiOf }) => {
      const found = await findThings({
        house: await apiOf(accountOf('auditor')),
        own: await apiOf(accountOf('client')),
      })
      const page = await as(accountOf(role))
      await look(
        page,
        screensOf(role, found).filter((screen) => areaOf(screen) === area),
      )
    })
  }
}

test('nothing keeps a person out: before signing in', async ({ anyone, apiOf }) => {
  const found = await findThings({
    house: await apiOf(accountOf('auditor')),
    own: await apiOf(accountOf('client')),
  })
  await look(await anyone(), publicScreens(found))
})

test('nothing keeps a person out: dialogs, the drawer of a number, the dark bench', async ({ as, apiOf }) => {
  const found = await findThings({
    house: await apiOf(accountOf('auditor')),
    own: await apiOf(accountOf('client')),
  })
  const page = await as(accountOf('qa-manager'))
  await page.goto(`/certificates/${found.certificate}`)
  await settled(page)
  await page
    .getByRole('button', { name: /what is behind this number/ })
    .first()
    .click()
  await expect(page.getByRole('dialog')).toContainText('Computed again')
  expect.soft(await violations(page), 'the drawer of a number').toEqual([])

  await page.goto(`/calibrations/${found.submittedCalibration}`)
  await page.getByRole('button', { name: 'Sign for use' }).click()
  await expect(page.getByRole('dialog').getByLabel('Your passphrase')).toBeVisible()
  expect.soft(await violations(page), 'the signature').toEqual([])

  await page.emulateMedia({ colorScheme: 'dark' })
  for (const path of [
    '/today',
    `/batches/${found.releasedBatch}`,
    `/calibrations/${found.calibrationInForce}`,
  ]) {
    await page.goto(path)
    await settled(page)
    expect.soft(await violations(page), `${path} in the dark`).toEqual([])
  }
})
