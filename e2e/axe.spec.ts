import { createRequire } from 'node:module'
import type { Page } from '@playwright/test'
import type Axe from 'axe-core'
import { ROLES, type Role } from '@weirlight/shared/permissions'
import { accountOf } from './support/accounts.js'
import {
  areaOf,
  findThings,
  publicScreens,
  screensOf,
  screensUnfilled,
  type Screen,
} from './support/screens.js'
import { settled } from './support/settled.js'
import { expect, test } from './support/test.js'

declare const axe: typeof Axe
const AXE = createRequire(import.meta.url).resolve('axe-core/axe.min.js')

/** In every document that the page opens from now on: handing axe over anew for each screen costs more than its rules. */
async function bringAxe(page: Page): Promise<Page> {
  await page.addInitScript({ path: AXE })
  return page
}

/** Violations of a screen that keep somebody out, in a line each. */
async function violations(page: Page): Promise<string[]> {
  // the browser's own viewer of PDFs is not ours to mend
  const { violations: found } = await page.evaluate(() =>
    axe.run({ exclude: [['iframe.document-frame']] }, { resultTypes: ['violations'] }),
  )
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

/** The roles share most screens: each is looked at as the first of these that can open it, and Today as everybody. */
const IN_TURN: readonly Role[] = ['qa-manager', 'administrator', 'client', 'technician', 'auditor']

function firstSeenBy(role: Role, screens: (role: Role) => readonly Screen[]): Screen[] {
  const before = new Set(
    IN_TURN.slice(0, IN_TURN.indexOf(role)).flatMap((other) => screens(other).map(({ name }) => name)),
  )
  return screens(role).filter(({ name }) => name === 'today' || !before.has(name))
}

test('every role has its turn', () => {
  expect(IN_TURN.toSorted()).toEqual(ROLES.toSorted())
})

for (const role of IN_TURN) {
  const areas = new Set(firstSeenBy(role, screensUnfilled).map(areaOf))
  for (const area of areas) {
    test(`nothing keeps a person out: ${role}, ${area}`, async ({ as, apiOf }) => {
      const found = await findThings({
        house: await apiOf(accountOf('auditor')),
        own: await apiOf(accountOf('client')),
      })
      const page = await bringAxe(await as(accountOf(role)))
      await look(
        page,
        firstSeenBy(role, (one) => screensOf(one, found)).filter((screen) => areaOf(screen) === area),
      )
    })
  }
}

test('nothing keeps a person out: before signing in', async ({ anyone, apiOf }) => {
  const found = await findThings({
    house: await apiOf(accountOf('auditor')),
    own: await apiOf(accountOf('client')),
  })
  await look(await bringAxe(await anyone()), publicScreens(found))
})

test('nothing keeps a person out: dialogs, the drawer of a number, the dark bench', async ({ as, apiOf }) => {
  const found = await findThings({
    house: await apiOf(accountOf('auditor')),
    own: await apiOf(accountOf('client')),
  })
  const page = await bringAxe(await as(accountOf('qa-manager')))
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
