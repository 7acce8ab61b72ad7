import { expect, type Page } from '@playwright/test'

/** Until the page says what it has to say: its heading is there, nothing is loading any more. */
export async function settled(page: Page): Promise<void> {
  await expect(page.getByRole('heading', { level: 1 }).first()).toBeVisible()
  await expect(page.locator('.skeleton, [aria-busy="true"]')).toHaveCount(0)
  await page.evaluate(() => document.fonts.ready.then(() => undefined))
}

/** A rectangle of one colour is a small picture: the browser's viewer has not shown its document yet. */
const BLANK_BYTES = 12_000

/** Until what draws itself after its data stands there: charts a frame later, a document once its viewer has it. */
export async function drawn(page: Page): Promise<void> {
  await page.evaluate(
    () => new Promise((resolve) => requestAnimationFrame(() => requestAnimationFrame(resolve))),
  )
  const viewer = page.locator('iframe.document-frame')
  if (!(await viewer.isVisible())) return
  await expect.poll(async () => (await viewer.screenshot()).length).toBeGreaterThan(BLANK_BYTES)
}
