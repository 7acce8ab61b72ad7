import { acceptInvitation, inviteUser } from '@weirlight/shared/contracts'
import type { Page } from '@playwright/test'
import { randomUUID } from 'node:crypto'
import { accountOf, type Account } from './support/accounts.js'
import { mailbox } from './support/mailbox.js'
import { codeOf } from './support/one-time-code.js'
import { giveReason } from './support/calibrating.js'
import type { Api } from './support/api.js'
import { expect, test } from './support/test.js'

const CODE = 'Code from your device, or a recovery code'

/** Somebody whom no other test signs in as. */
async function somebodyNew(administrator: Api): Promise<Account> {
  const email = `ivo.stark.${randomUUID().slice(0, 8)}@marrowfield.example`
  const passphrase = `${randomUUID()} four words`
  const name = 'Ivo Stark'
  await administrator.call(inviteUser, { body: { email, name, role: 'technician' } })
  const mail = await mailbox.read({ to: email, about: '/invitation/' })
  const token =
    mailbox
      .link(mail, /https?:\/\/\S+\/invitation\/\S+/)
      .split('/')
      .at(-1) ?? ''
  await administrator.call(acceptInvitation, { params: { token }, body: { name, passphrase } })
  return { role: 'technician', name, email, passphrase }
}

async function givePassphrase(page: Page, { email, passphrase }: Account): Promise<void> {
  await page.goto('/sign-in')
  await page.getByLabel('E-mail').fill(email)
  await page.getByLabel('Passphrase').fill(passphrase)
  await page.getByRole('button', { name: 'Sign in' }).click()
}

async function signOut(page: Page): Promise<void> {
  await page.getByRole('button', { name: /: account$/ }).click()
  await page.getByRole('button', { name: 'Sign out' }).click()
  await expect(page).toHaveURL(/\/sign-in/)
}

test('a second factor is set up, signs in once a code, and is taken off again', async ({ anyone, apiOf }) => {
  const person = await somebodyNew(await apiOf(accountOf('administrator')))
  const page = await anyone()
  await givePassphrase(page, person)
  await expect(page).toHaveURL(/\/today$/)

  const { secret, recoveryCodes } = await test.step('sets it up', async () => {
    await page.getByRole('button', { name: /: account$/ }).click()
    await page.getByRole('link', { name: 'Your account' }).click()
    await page.getByRole('button', { name: 'Set up a second factor' }).click()
    const dialog = page.getByRole('dialog')
    await dialog.getByLabel('Your passphrase').fill('not the passphrase of anybody')
    await dialog.getByRole('button', { name: 'Go on' }).click()
    await expect(dialog.getByText('This is not your passphrase. Nothing was changed.')).toBeVisible()
    await dialog.getByLabel('Your passphrase').fill(person.passphrase)
    await dialog.getByRole('button', { name: 'Go on' }).click()

    await expect(page.getByRole('img', { name: /^Picture for your device/ }).locator('svg')).toBeVisible()
    const secret = await page.locator('.device-secret').innerText()
    expect(secret).toMatch(/^([A-Z2-7]{4} ){7}[A-Z2-7]{4}$/)
    await page.getByLabel('The code that your device shows now').fill('12345')
    await page.getByRole('button', { name: 'Turn it on' }).click()
    await expect(
      page.getByText('Enter the six digits that your device shows.', { exact: true }),
    ).toBeVisible()
    await page.getByLabel('The code that your device shows now').fill(codeOf(secret))
    await page.getByRole('button', { name: 'Turn it on' }).click()

    const codes = page.getByRole('list', { name: 'Recovery codes' }).getByRole('listitem')
    await expect(codes).toHaveCount(10)
    const recoveryCodes = await codes.allInnerTexts()
    await page.getByRole('button', { name: 'I have kept them' }).click()
    await expect(page.getByText('10 recovery codes are left.')).toBeVisible()
    return { secret, recoveryCodes }
  })

  await test.step('signs in with a code, and with the same one no more', async () => {
    await signOut(page)
    await givePassphrase(page, person)
    await expect(page.getByLabel(CODE)).toBeFocused()
    // the code of now has confirmed the set-up; a device whose clock is half a minute ahead shows the next
    const code = codeOf(secret, { stepsAhead: 1 })
    await page.getByLabel(CODE).fill(code)
    await page.getByRole('button', { name: 'Sign in' }).click()
    await expect(page).toHaveURL(/\/today$/)

    await signOut(page)
    await givePassphrase(page, person)
    await page.getByLabel(CODE).fill(code)
    await page.getByRole('button', { name: 'Sign in' }).click()
    await expect(page.getByText('This code was used already. Wait for the next one.')).toBeVisible()
  })

  await test.step('signs in with a recovery code, typed without its hyphens', async () => {
    await page.getByLabel(CODE).fill((recoveryCodes[0] ?? '').replaceAll('-', ' ').toLowerCase())
    await page.getByRole('button', { name: 'Sign in' }).click()
    await expect(page).toHaveURL(/\/today$/)
  })

  await test.step('takes it off: the passphrase alone signs in', async () => {
    await page.goto('/account')
    await expect(page.getByText('9 recovery codes are left.')).toBeVisible()
    await page.getByRole('button', { name: 'Take it off' }).click()
    const dialog = page.getByRole('dialog')
    await dialog.getByLabel('Your passphrase').fill(person.passphrase)
    await dialog.getByLabel(CODE).fill(recoveryCodes[1] ?? '')
    await dialog.getByRole('button', { name: 'Take it off' }).click()
    await expect(page.getByRole('button', { name: 'Set up a second factor' })).toBeVisible()
    await signOut(page)
    await givePassphrase(page, person)
    await expect(page).toHaveURL(/\/today$/)
    await mailbox.read({ to: person.email, about: 'has no second factor any more' })
  })
})

test('the administrator sees who has one, and takes it off for somebody who lost the device', async ({
  as,
  anyone,
  apiOf,
}) => {
  const person = await somebodyNew(await apiOf(accountOf('administrator')))
  const page = await anyone()
  await givePassphrase(page, person)
  await expect(page).toHaveURL(/\/today$/)
  await page.goto('/account')
  await page.getByRole('button', { name: 'Set up a second factor' }).click()
  await page.getByRole('dialog').getByLabel('Your passphrase').fill(person.passphrase)
  await page.getByRole('dialog').getByRole('button', { name: 'Go on' }).click()
  const secret = await page.locator('.device-secret').innerText()
  await page.getByLabel('The code that your device shows now').fill(codeOf(secret))
  await page.getByRole('button', { name: 'Turn it on' }).click()
  await expect(page.getByRole('list', { name: 'Recovery codes' })).toBeVisible()

  const desk = await as(accountOf('administrator'))
  await desk.goto(`/settings/people?find=${encodeURIComponent(person.email)}`)
  await expect(desk.getByRole('row').filter({ hasText: person.email }).getByText('yes')).toBeVisible()
  await desk.getByRole('link', { name: person.name }).click()
  const reason = 'Lost the phone on the train.'
  await giveReason(desk, { open: 'Take off the second factor', act: 'Take it off', reason })
  await expect(desk.getByRole('button', { name: 'Take off the second factor' })).toHaveCount(0)

  const mail = await mailbox.read({ to: person.email, about: 'has no second factor any more' })
  expect(mail.text).toContain(reason)
  await page.goto('/today')
  await expect(page).toHaveURL(/\/sign-in/)
  await givePassphrase(page, person)
  await expect(page).toHaveURL(/\/today$/)

  const auditor = await as(accountOf('auditor'))
  await auditor.goto('/history?thing=users&action=user.take-off-second-factor')
  const line = auditor.getByRole('row').filter({ hasText: reason }).first()
  await expect(line).toContainText('Took off a person’s second factor')
})
