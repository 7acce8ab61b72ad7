import { inviteUser, listUsers } from '@weirlight/shared/contracts'
import type { Agent } from '../../testing/agent.js'
import type { TestApp } from '../../testing/test-app.js'

/** What somebody chooses who chooses a new one. */
export const NEW_PASSPHRASE = 'twelve quiet herons eat soup'
export const reason = 'for this test'

let count = 0

export function anInvited(administrator: Agent, changes: Record<string, unknown> = {}) {
  count += 1
  return administrator.call(inviteUser, {
    body: { email: `new-${count}@people.example`, name: 'Nora New', role: 'technician', ...changes },
  })
}

export async function versionOf(administrator: Agent, userId: string): Promise<number> {
  const { items } = await administrator.call(listUsers, {})
  return items.find(({ id }) => id === userId)?.version ?? 0
}

/** The secret part of the link in the last message to this address. */
export async function lastLinkTo({ database }: TestApp, email: string): Promise<string> {
  const { rows } = await database.owner.pool.query<{ body_text: string }>(
    'select body_text from mail_messages where recipient = $1 order by id desc limit 1',
    [email],
  )
  return /\/(?:invitation|reset)\/([\w-]+)/.exec(rows[0]?.body_text ?? '')?.[1] ?? ''
}

/** The subjects of all messages to this address, oldest first. */
export async function mailsTo({ database }: TestApp, email: string): Promise<string[]> {
  const { rows } = await database.owner.pool.query<{ subject: string }>(
    'select subject from mail_messages where recipient = $1 order by id',
    [email],
  )
  return rows.map(({ subject }) => subject)
}
