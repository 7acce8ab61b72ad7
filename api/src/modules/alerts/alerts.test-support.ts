import { aReleasedResult } from '../../testing/builders/results.builders.js'
import { aUser } from '../../testing/people.js'
import type { TestApp } from '../../testing/test-app.js'

export const alertsOf = (at: TestApp, resultIds: readonly string[]) =>
  at.database.db.fresh
    .selectFrom('alerts')
    .selectAll()
    .where('resultId', 'in', [...resultIds])
    .orderBy('id')
    .execute()

/** With the result that raised it and somebody of the client who may answer it. */
export async function anAlert(at: TestApp) {
  const released = await aReleasedResult(at)
  const [alert] = await alertsOf(at, [released.result.id])
  if (!alert) throw new Error('No alert was raised.')
  const client = await aUser(at.database.db, { role: 'client', clientId: released.clientId })
  return { ...released, alert, client }
}

export const byClient = (recipient: string) => recipient.endsWith('@utility.example')
