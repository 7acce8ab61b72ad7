import { JobsService } from '../platform/index.js'
import { sendMail } from '../platform/mail/mail.jobs.js'
import type { TestApp } from './test-app.js'

/** Every message about a thing, oldest first. */
export function mailAbout(at: TestApp, about: { kind: string; id: string }) {
  return at.database.db.fresh
    .selectFrom('mailMessages')
    .selectAll()
    .where('aboutKind', '=', about.kind)
    .where('aboutId', '=', about.id)
    .orderBy('id')
    .execute()
}

/** Lets what waits leave, as a worker would; `only` chooses by recipient. */
export async function letMailLeave(
  at: TestApp,
  only: (recipient: string) => boolean = () => true,
): Promise<void> {
  const waiting = await at.database.db.fresh
    .selectFrom('mailMessages')
    .select(['id', 'recipient'])
    .where('state', '=', 'waiting')
    .orderBy('id')
    .execute()
  for (const { id, recipient } of waiting) {
    if (only(recipient)) await at.get(JobsService).runNow(sendMail, { id })
  }
}
