import type { Page } from '@playwright/test'
import type { BatchView } from '@weirlight/shared/contracts'
import { giveReason, openFromToday, sign } from '../support/calibrating.js'
import { expect } from '../support/test.js'
import type { Start, Way } from './way.js'

/** The calibration as the technician submitted it, from Today. */
export async function openSubmitted(page: Page, { technician }: Start, number: string): Promise<void> {
  await openFromToday(page, number)
  await expect(page.getByText(technician.name).first()).toBeVisible()
}

/** @returns the reason that was given */
export async function sendCalibrationBack(page: Page): Promise<string> {
  const reason = 'The second source was read without its own blank; read both again.'
  await giveReason(page, { open: 'Send back', act: 'Send back', reason })
  await expect(page.getByText('Sent back').first()).toBeVisible()
  return reason
}

export async function signCalibration(page: Page, { manager }: Start): Promise<void> {
  await sign(page, { open: 'Sign for use', act: 'Sign for use', passphrase: manager.passphrase })
  await expect(page.getByText('In force', { exact: true }).first()).toBeVisible()
}

export async function releaseBatch(
  page: Page,
  way: Way,
  given: { batch: BatchView; reported: string },
): Promise<void> {
  const { metal, manager, low, high } = way
  await openFromToday(page, given.batch.number)
  const results = page.getByRole('region', { name: 'Results as they would be reported' })
  const above = results.getByRole('row').filter({ hasText: high })
  await expect(above).toContainText(`above ${metal.above.limit}`)
  await expect(above).toContainText(given.reported)
  await expect(results.getByRole('row').filter({ hasText: low })).toContainText('below')
  await sign(page, { open: 'Release with signature', act: 'Release', passphrase: manager.passphrase })
  await expect(page).toHaveURL(/\/review$/)
}
