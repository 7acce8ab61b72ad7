import { statSync } from 'node:fs'
import { listAlerts, listResults } from '@weirlight/shared/contracts'
import { paths } from '@weirlight/shared/paths'
import type { Role } from '@weirlight/shared/permissions'
import { accountOf, product, type Account } from '../support/accounts.js'
import type { Api } from '../support/api.js'
import { findThings } from '../support/screens.js'
import { drawn, settled } from '../support/settled.js'
import { expect, test } from '../support/test.js'

const DESK = { width: 1440, height: 900 }
const PHONE = { width: 390, height: 844 }
const LARGEST_BYTES = 150_000

interface Shot {
  name: string
  role: Role
  /** which of the accounts of the role; the first unless said */
  index?: number
  path: string
  size?: typeof DESK
}

/** A client that has an alert to answer, and the alert. */
async function clientWithAnAlert(apiOf: (account: Account) => Promise<Api>) {
  const clients = product().accounts.filter(({ role }) => role === 'client')
  for (const [index, account] of clients.entries()) {
    const own = await apiOf(account)
    const { items } = await own.call(listAlerts, { query: { state: 'notified' } })
    if (items[0]) return { index, path: paths.portalAlert(items[0].id) }
  }
  throw new Error('No client of the demonstration has an alert to answer.')
}

test('the pictures of the tour', async ({ as, apiOf }) => {
  const house = await apiOf(accountOf('auditor'))
  const things = await findThings({ house, own: await apiOf(accountOf('client')) })
  const { items } = await house.call(listResults, {
    query: { state: 'released', verdict: 'above', analyte: 'Fe' },
  })
  const above = items[0]
  const waiting = await clientWithAnAlert(apiOf)
  const shots: Shot[] = [
    { name: '1-today', role: 'technician', path: paths.today },
    { name: '2-calibration', role: 'qa-manager', path: paths.calibration(things.submittedCalibration) },
    { name: '3-batch', role: 'technician', path: paths.batch(things.openBatch) },
    { name: '4-review', role: 'qa-manager', path: paths.reviewBatch(things.submittedBatch) },
    { name: '5-story', role: 'auditor', path: paths.result(above?.id ?? things.result) },
    // all that was done to one sample says more than who signed in last
    { name: '6-history', role: 'auditor', path: `${paths.history}?number=${above?.sampleNumber ?? ''}` },
    { name: '7-certificate', role: 'client', path: paths.portalCertificate(things.ownCertificate) },
    { name: '8-alert-phone', role: 'client', size: PHONE, ...waiting },
  ]
  for (const { name, role, path, size = DESK, index = 0 } of shots) {
    const page = await as(accountOf(role, index))
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
