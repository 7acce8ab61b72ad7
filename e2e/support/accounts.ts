import { readFileSync } from 'node:fs'
import type { Role } from '@weirlight/shared/permissions'
import { z } from 'zod'

const account = z.object({
  role: z.enum(['technician', 'qa-manager', 'client', 'auditor', 'administrator']),
  name: z.string(),
  email: z.string(),
  passphrase: z.string(),
})
export type Account = z.infer<typeof account>

const facts = z.object({
  url: z.string(),
  mailUrl: z.string(),
  databaseUrl: z.string(),
  accounts: z.array(account),
})
export type Facts = z.infer<typeof facts>

let read: Facts | undefined

/** Where the product under test answers, and who can sign in: written by what started it. */
export function product(): Facts {
  const file = process.env['E2E_ACCOUNTS_FILE']
  if (!file) throw new Error('E2E_ACCOUNTS_FILE is not set: start these tests by `npm test`.')
  return (read ??= facts.parse(JSON.parse(readFileSync(file, 'utf8'))))
}

/** The first, second … account of a role. */
export function accountOf(role: Role, index = 0): Account {
  const found = product().accounts.filter((each) => each.role === role)[index]
  if (!found) throw new Error(`The demonstration has no ${role} number ${index + 1}.`)
  return found
}

export function accountByEmail(email: string): Account {
  const found = product().accounts.find((each) => each.email === email)
  if (!found) throw new Error(`The demonstration has no account of ${email}.`)
  return found
}
