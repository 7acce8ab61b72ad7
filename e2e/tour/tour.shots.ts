import { statSync } from 'node:fs'
import { listResults } from '@weirlight/shared/contracts'
import { paths } from '@weirlight/shared/paths'
import type { Role } from '@weirlight/shared/permissions'
import { accountOf } from '../support/accounts.js'
import { findThings } from '../support/screens.js'
import { drawn, settled } from '../support/settled.js'
import { expect, test } from '../support/test.js'

const DESK = { width: 1440, height: 900 }
const PHONE = { width: 390, height: 844 }
const LARGEST_BYTES = 150_000

interface Shot {
  name: string
  role: Role
  path: string
  size?: typeof DESK
}

test('the pictures of the tour', async ({ as, apiOf }) => {
  const house = await apiOf(accountOf('auditor'))
  const things = await findThings({ house, own: await apiOf(accountOf('client')) })
  const { items } = await house.call(listResults, { query: { state: 'released', verdict: 'above' } })
  const above = items[0]?.id ?? things.result
  const shots: Shot[] = [
    { name: '1-today', role: 'technician', path: paths.today },
    { name: '2-calibration', role: 'qa-manager', path: paths.calibration(things.submittedCalibration) },
    { name: '3-batch', role: 'technician', path: paths.batch(things.openBatch) },
    { name: '4-review', role: 'qa-manager', path: paths.reviewBatch(things.submittedBatch) },
    { name: '5-story', role: 'auditor', path: paths.result(above) },
    { name: '6-history', role: 'auditor', path: paths.history },
    { name: '7-certificate', role: 'client', path: paths.portalCertificate(things.ownCertificate) },
    { name: '8-alert-phone', role: 'client', path: paths.portalAlert(things.ownAlert), size: PHONE },
  ]
  for (const { name, role, path, size = DESK } of shots) {
    const page = await as(accountOf(role))
    await page.setViewportSize(size)
    await page.emulateMedia({ reducedMotion: 'reduce' })
    await page.goto(path)
    await settled(page)
    await drawn(page)
    const file = `tour/${name}.jpg`
    await page.screenshot({ path: file, type: 'jpeg', quality: 72, animations: 'disabled' })
    expect.soft(statSync(file).size, `${file} is large for a README`).toBeLessThanOrEqual(LARGEST_BYTES)
    await page.close()
  }
})
