import { expect, type Page } from '@playwright/test'

/** Until the page says what it has to say: its heading is there, nothing is loading any more. */
export async function settled(page: Page): Promise<void> {
  await expect(page.getByRole('heading', { level: 1 }).first()).toBeVisible()
  await expect(page.locator('.skeleton, [aria-busy="true"]')).toHaveCount(0)
  await page.evaluate(() => document.fonts.ready.then(() => undefined))
}
