import { ROLES } from '@weirlight/shared/permissions'
import { accountOf } from './support/accounts.js'
import { mailbox } from './support/mailbox.js'
import { expect, test } from './support/test.js'

const FIRST_PAGE = {
  technician: /\/today$/,
  'qa-manager': /\/today$/,
  auditor: /\/today$/,
  administrator: /\/today$/,
  client: /\/our$/,
}

for (const role of ROLES) {
  test(`the ${role} signs in on the page and out again`, async ({ anyone }) => {
    const account = accountOf(role)
    const page = await anyone()
    await page.goto('/')
    await page.getByLabel('E-mail').fill(account.email)
    await page.getByLabel('Passphrase').fill(account.passphrase)
    await page.getByRole('button', { name: 'Sign in' }).click()
    await expect(page).toHaveURL(FIRST_PAGE[role])
    await expect(page.getByRole('heading', { level: 1 })).toBeVisible()

    const [cookie] = await page.context().cookies()
    expect(cookie).toMatchObject({ httpOnly: true, sameSite: 'Strict' })

    await page.getByRole('button', { name: /: account$/ }).click()
    await page.getByRole('button', { name: 'Sign out' }).click()
    await expect(page).toHaveURL(/\/sign-in/)
    await page.goto('/today')
    await expect(page).toHaveURL(/\/sign-in/)
  })
}

test('a wrong passphrase and an unknown person are refused in the same words', async ({ anyone }) => {
  const page = await anyone()
  await page.goto('/sign-in')
  const refusal = async (email: string) => {
    await page.getByLabel('E-mail').fill(email)
    await page.getByLabel('Passphrase').fill('not the passphrase of anybody')
    await page.getByRole('button', { name: 'Sign in' }).click()
    const alert = page.getByRole('alert')
    await expect(alert).toBeVisible()
    return alert.innerText()
  }
  const known = await refusal(accountOf('auditor').email)
  const unknown = await refusal('nobody@marrowfield.example')
  expect(unknown).toBe(known)
})

test('the page asked for opens after signing in', async ({ anyone }) => {
  const account = accountOf('auditor')
  const page = await anyone()
  await page.goto('/history/seals')
  await page.getByLabel('E-mail').fill(account.email)
  await page.getByLabel('Passphrase').fill(account.passphrase)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await expect(page).toHaveURL(/\/history\/seals$/)
})

test('a forgotten passphrase: the link is mailed, and an unknown address is answered alike', async ({
  anyone,
}) => {
  const account = accountOf('client', 5)
  const page = await anyone()
  const ask = async (email: string) => {
    await page.goto('/forgot')
    await page.getByLabel('E-mail').fill(email)
    await page.getByRole('button', { name: 'Send the link' }).click()
    await expect(page.getByRole('main').getByRole('status')).toContainText(`If ${email} has an account here`)
  }
  await ask('nobody@marrowfield.example')
  await ask(account.email)
  const mail = await mailbox.read({ to: account.email, about: '/reset/' })
  await page.goto(mailbox.link(mail, /https?:\/\/\S+\/reset\/\S+/))
  await expect(page.getByLabel('New passphrase', { exact: true })).toBeVisible()
})
