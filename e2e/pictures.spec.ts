import { ROLES } from '@weirlight/shared/permissions'
import type { Page } from '@playwright/test'
import { accountOf } from './support/accounts.js'
import { areaOf, areasOf, findThings, publicScreens, screensOf, type Screen } from './support/screens.js'
import { drawn, settled } from './support/settled.js'
import { expect, test } from './support/test.js'

const WIDTHS = [
  { width: 1440, height: 1000 },
  { width: 1024, height: 768 },
  { width: 390, height: 844 },
]

/** Long lists are cut: a picture is for the eye. */
const TALLEST = 4000

async function photograph(page: Page, given: { role: string; screens: readonly Screen[] }): Promise<void> {
  await page.emulateMedia({ reducedMotion: 'reduce' })
  for (const screen of given.screens) {
    for (const size of WIDTHS) {
      await page.setViewportSize(size)
      await page.goto(screen.path)
      await settled(page)
      await drawn(page)
      const height = await page.evaluate(() => document.documentElement.scrollHeight)
      await page.screenshot({
        path: `pictures/${size.width}/${given.role}-${screen.name}.png`,
        animations: 'disabled',
        fullPage: true,
        clip: { x: 0, y: 0, width: size.width, height: Math.min(Math.max(height, size.height), TALLEST) },
      })
      const overflow = await page.evaluate(
        () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
      )
      expect.soft(overflow, `${screen.name} is wider than ${size.width}`).toBeLessThanOrEqual(0)
    }
  }
}

for (const role of ROLES) {
  for (const area of areasOf(role)) {
    test(`${role}: ${area}`, async ({ as, apiOf }) => {
      const things = await findThings({
        house: await apiOf(accountOf('auditor')),
        own: await apiOf(accountOf('client')),
      })
      const screens = screensOf(role, things).filter((screen) => areaOf(screen) === area)
      await photograph(await as(accountOf(role)), { role, screens })
    })
  }
}

test('nobody signed in', async ({ anyone, apiOf }) => {
  const things = await findThings({
    house: await apiOf(accountOf('auditor')),
    own: await apiOf(accountOf('client')),
  })
  await photograph(await anyone(), { role: 'nobody', screens: publicScreens(things) })
})
