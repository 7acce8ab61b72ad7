import { signCalibration, startCalibration, submitCalibration } from '@weirlight/shared/contracts'
import { randomUUID } from 'node:crypto'
import { accountOf } from './support/accounts.js'
import { giveReason } from './support/calibrating.js'
import { mailbox } from './support/mailbox.js'
import { methodId } from './support/set-up.js'
import { expect, test } from './support/test.js'

const LINK = /https?:\/\/\S+\/invitation\/\S+/

test('the administrator invites by e-mail, gives a role, and disables: signed out at once', async ({
  as,
  anyone,
}) => {
  const email = `nadia.roth.${randomUUID().slice(0, 8)}@marrowfield.example`
  const passphrase = `${randomUUID()} four words`
  const desk = await as(accountOf('administrator'))

  const invited = await test.step('invites', async () => {
    await desk.goto('/settings/people')
    await desk.getByRole('button', { name: 'Invite a person' }).click()
    const dialog = desk.getByRole('dialog')
    await dialog.getByLabel('E-mail').fill(email)
    await dialog.getByLabel('Name').fill('Nadia Roth')
    await dialog.getByLabel('Role').selectOption({ label: 'Technician' })
    await dialog.getByRole('button', { name: 'Send the invitation' }).click()
    await expect(dialog).toBeHidden()
    return mailbox.read({ to: email, about: '/invitation/' })
  })

  const page = await anyone()
  await test.step('the person accepts and signs in', async () => {
    const link = mailbox.link(invited, LINK)
    await page.goto(link)
    await expect(page.getByText(`invites ${email} as Technician`)).toBeVisible()
    await page.getByLabel('New passphrase').fill(passphrase)
    await page.getByLabel('The same again').fill(passphrase)
    await page.getByRole('button', { name: 'Accept the invitation' }).click()
    await expect(page.getByText('Your account is ready.')).toBeVisible()
    await page.getByLabel('E-mail').fill(email)
    await page.getByLabel('Passphrase').fill(passphrase)
    await page.getByRole('button', { name: 'Sign in' }).click()
    await expect(page.getByRole('link', { name: 'Receiving' })).toBeVisible()
    await expect(page.getByRole('link', { name: 'History' })).toHaveCount(0)
    // once only
    const again = await anyone()
    await again.goto(link)
    await expect(again.getByText('This invitation is used, too old or not complete.')).toBeVisible()
  })

  await test.step('gives another role: the old rights end at once', async () => {
    await desk.getByLabel('Name or e-mail').fill(email)
    await expect(desk).toHaveURL(/find=/)
    await expect(desk.getByRole('link', { name: 'Nadia Roth' })).toHaveCount(1)
    await desk.getByRole('link', { name: 'Nadia Roth' }).click()
    await expect(desk.getByText('Active', { exact: true }).first()).toBeVisible()
    await desk.getByRole('button', { name: 'Change', exact: true }).click()
    const dialog = desk.getByRole('dialog')
    await dialog.getByLabel('Role').selectOption({ label: 'Auditor' })
    await dialog.getByLabel(/^Why/).fill('Takes over the audits.')
    await dialog.getByRole('button', { name: 'Change it' }).click()
    await expect(dialog).toBeHidden()
    await page.goto('/today')
    await expect(page).toHaveURL(/\/sign-in/)
    await page.getByLabel('E-mail').fill(email)
    await page.getByLabel('Passphrase').fill(passphrase)
    await page.getByRole('button', { name: 'Sign in' }).click()
    await expect(page.getByRole('link', { name: 'History' })).toBeVisible()
  })

  await test.step('mails a link to a new passphrase', async () => {
    await giveReason(desk, {
      open: 'Send a new-passphrase link',
      act: 'Mail the link',
      reason: 'Forgot it on holiday.',
    })
    const mail = await mailbox.read({ to: email, about: '/reset/' })
    const forgetful = await anyone()
    await forgetful.goto(mailbox.link(mail, /https?:\/\/\S+\/reset\/\S+/))
    await expect(forgetful.getByLabel('New passphrase', { exact: true })).toBeVisible()
  })

  await test.step('disables: signed out at once, and in no more', async () => {
    await giveReason(desk, { open: 'Disable', act: 'Disable', reason: 'Left the laboratory.' })
    await expect(desk.getByText('Disabled', { exact: true }).first()).toBeVisible()
    await page.goto('/history')
    await expect(page).toHaveURL(/\/sign-in/)
    await page.getByLabel('E-mail').fill(email)
    await page.getByLabel('Passphrase').fill(passphrase)
    await page.getByRole('button', { name: 'Sign in' }).click()
    await expect(page.getByRole('alert').first()).toBeVisible()
    await expect(page).toHaveURL(/\/sign-in/)
  })

  await test.step('the history has all of it, with the reason', async () => {
    const auditor = await as(accountOf('auditor'))
    await auditor.goto('/history?thing=users&action=user.disable')
    const line = auditor.getByRole('row').filter({ hasText: 'Left the laboratory.' }).first()
    await expect(line).toContainText(accountOf('administrator').name)
    await expect(line).toContainText('Disabled an account')
  })
})

test('nobody signs their own calibration: not on the page, not past it', async ({ as, apiOf }) => {
  const manager = accountOf('qa-manager')
  const api = await apiOf(manager)
  const list = async (path: string) =>
    (JSON.parse((await api.file(path)).toString()) as { items: { id: string; analyte?: string }[] }).items
  const [instrument] = await list('/api/instruments')
  const stocks = await list('/api/materials?kind=stock&usable=yes')
  const stock = stocks.find((lot) => lot.analyte === 'Fe')
  // constructed: 0.197 A per mg/L in 1 cm after an intercept of 0.0012
  const levels = [0, 0.05, 0.4, 1, 2, 3, 4]
  const draft = await api.call(startCalibration, {
    body: {
      draftId: randomUUID(),
      methodId: await methodId(api, 'fe-phenanthroline'),
      instrumentId: instrument?.id ?? '',
      cellPathCm: '10',
      stockLotId: stock?.id ?? null,
      reagentLotIds: [],
      model: 'linear',
      weighting: 'none',
      colourStartedAt: null,
      temperatureC: '',
      note: 'To see that nobody signs their own.',
      standards: levels.map((level) => ({
        role: 'standard' as const,
        concentration: String(level),
        lotId: null,
        readings: [(0.0012 + 0.197 * level).toFixed(4)],
        leftOutReason: '',
      })),
    },
  })
  const submitted = await api.call(submitCalibration, {
    params: { id: draft.id },
    body: { version: draft.version },
  })
  const page = await as(manager)
  await page.goto(`/calibrations/${submitted.id}`)
  await expect(page.getByText('You prepared it: somebody else must sign.')).toBeVisible()
  await expect(page.getByRole('button', { name: 'Sign for use' })).toHaveCount(0)
  const refused = await api.send(signCalibration, {
    params: { id: submitted.id },
    body: { version: submitted.version, passphrase: manager.passphrase, justification: 'My own.' },
  })
  expect(refused.status).toBe(403)
  expect(refused.text).toContain('somebody else must sign it')
})
