import { randomUUID } from 'node:crypto'
import type { BodyInput, receiveSample } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { ReceivingService, SamplesService } from '../../modules/samples/index.js'
import { SYSTEM } from '../../platform/database/acting.js'
import { aUser } from '../people.js'
import type { TestApp } from '../test-app.js'
import type { TestDatabase } from '../test-database.js'
import { methodId, theReference } from './reference.builders.js'

let count = 0

/** A sampling point of a client that follows the given programme. */
export async function aPoint(
  database: TestDatabase,
  { programme = 'eu-drinking-water', clientId }: { programme?: string; clientId?: string } = {},
): Promise<{ id: string; code: string; clientId: string; clientCode: string; clientName: string }> {
  const { programmes } = await theReference(database)
  const programmeId = programmes[programme]
  if (programmeId === undefined) throw new Error(`There is no programme ${programme}.`)
  count += 1
  const n = count
  return database.db.transaction(SYSTEM, 'client.create', null, async (trx) => {
    const client =
      clientId === undefined
        ? await trx
            .insertInto('clients')
            .values({ code: `W${process.pid}-${n}`, name: `Waterworks ${n} of ${process.pid}`, programmeId })
            .returning(['id', 'code', 'name'])
            .executeTakeFirstOrThrow()
        : await trx
            .selectFrom('clients')
            .select(['id', 'code', 'name'])
            .where('id', '=', clientId)
            .executeTakeFirstOrThrow()
    const point = await trx
      .insertInto('samplingPoints')
      .values({ clientId: client.id, code: `P${n}`, name: `Outlet ${n}`, kind: 'treated' })
      .returning(['id', 'code'])
      .executeTakeFirstOrThrow()
    return { ...point, clientId: client.id, clientCode: client.code, clientName: client.name }
  })
}

type Form = BodyInput<typeof receiveSample>

/** What the receiving form sends: an operational sample in acid, collected yesterday, received an hour ago. */
export async function aReceivingForm(
  at: TestApp,
  changes: Partial<Form> & { methodCodes?: readonly string[]; programme?: string } = {},
): Promise<Form> {
  const { methodCodes = ['fe-phenanthroline'], programme, ...form } = changes
  const now = at.database.clock.now().getTime()
  const point =
    form.pointId === undefined
      ? await aPoint(at.database, programme === undefined ? {} : { programme })
      : undefined
  const methods = await Promise.all(methodCodes.map((code) => methodId(at.database, code)))
  return {
    draftId: randomUUID(),
    clientId: point?.clientId ?? '',
    pointId: point?.id ?? '',
    purpose: 'operational',
    kind: 'routine',
    collectedAt: new Date(now - 24 * 3_600_000).toISOString(),
    collectedBy: 'R. Sampler',
    receivedAt: new Date(now - 3_600_000).toISOString(),
    preservation: 'nitric-acid',
    ph: '1.6',
    temperatureC: '',
    container: 'plastic',
    filteredInField: false,
    condition: '',
    remarks: '',
    determinations: methods.map((method) => ({ methodId: method })),
    ...form,
  }
}

export async function aReceivedSample(
  at: TestApp,
  { actor, ...changes }: Parameters<typeof aReceivingForm>[1] & { actor?: Actor } = {},
) {
  const by = actor ?? (await aUser(at.database.db))
  return at.get(ReceivingService).receive(by, await aReceivingForm(at, changes))
}

/** An operational sample that passed its checks, its determinations waiting. */
export async function anAcceptedSample(
  at: TestApp,
  changes: Parameters<typeof aReceivingForm>[1] & { actor?: Actor } = {},
) {
  const actor = changes.actor ?? (await aUser(at.database.db))
  const sample = await aReceivedSample(at, { ...changes, actor })
  return at.get(SamplesService).decide(actor, sample.id, {
    version: sample.version,
    verdict: 'accepted',
    reason: '',
    clientConsent: '',
  })
}
