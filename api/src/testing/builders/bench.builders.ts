import type { Actor } from '@weirlight/shared/permissions'
import { PassphraseHasher } from '../../modules/users/index.js'
import { SYSTEM } from '../../platform/database/acting.js'
import { aUser } from '../people.js'
import type { TestDatabase } from '../test-database.js'
import { methodId } from './reference.builders.js'

let count = 0
const DAY = 86_400_000

/** `daysFromToday(30)`: as the database writes days */
export function daysFromToday({ clock }: TestDatabase, days: number): string {
  return new Date(clock.now().getTime() + days * DAY).toISOString().slice(0, 10)
}

interface LotChanges {
  kind?: 'reagent' | 'stock' | 'working-standard' | 'control' | 'second-source'
  analyte?: string | null
  concentration?: string | null
  uncertainty?: string | null
  expiresOn?: string
  state?: 'in-use' | 'used-up' | 'withdrawn'
}

export async function aLot(
  database: TestDatabase,
  changes: LotChanges = {},
): Promise<{ id: string; number: string }> {
  count += 1
  const kind = changes.kind ?? 'stock'
  const isReagent = kind === 'reagent'
  return database.db.transaction(SYSTEM, 'material.add', null, (trx) =>
    trx
      .insertInto('materialLots')
      .values({
        number: `${isReagent ? 'R' : 'W'}-T-${process.pid}-${count}`,
        kind,
        name: isReagent ? 'Test reagent' : 'Test standard',
        analyte: isReagent ? null : 'Fe',
        concentration: isReagent ? null : '1000',
        uncertainty: isReagent ? null : '4',
        lotCode: `L${count}`,
        producer: 'Example Standards',
        receivedOn: daysFromToday(database, -200),
        expiresOn: daysFromToday(database, 200),
        ...changes,
      })
      .returning(['id', 'number'])
      .executeTakeFirstOrThrow(),
  )
}

/** A spectrophotometer whose checks are in date unless told otherwise. */
export async function anInstrument(
  database: TestDatabase,
  { checkDueOn, state = 'in-use' }: { checkDueOn?: string; state?: 'in-use' | 'out-of-use' } = {},
): Promise<{ id: string; name: string }> {
  count += 1
  const checker = await aUser(database.db)
  return database.db.transaction(SYSTEM, 'instrument.add', null, async (trx) => {
    const instrument = await trx
      .insertInto('instruments')
      .values({
        number: `I-T-${process.pid}-${count}`,
        name: `Spectrophotometer ${count}`,
        kind: 'double beam',
        serial: `SN${count}`,
        location: 'Bench 2',
        bandwidthNm: '2',
        state,
      })
      .returning(['id', 'name'])
      .executeTakeFirstOrThrow()
    await trx
      .insertInto('instrumentChecks')
      .values({
        instrumentId: instrument.id,
        kind: 'wavelength',
        reference: 'holmium oxide',
        nominal: '536.4',
        found: '536.5',
        tolerance: '1.0',
        unit: 'nm',
        passed: true,
        checkedBy: checker.userId,
        nextDueOn: checkDueOn ?? daysFromToday(database, 90),
      })
      .execute()
    return instrument
  })
}

export async function authorise(
  database: TestDatabase,
  actor: Actor,
  { methodCode, activity }: { methodCode: string; activity: 'read' | 'sign-calibration' | 'review' },
): Promise<void> {
  const method = await methodId(database, methodCode)
  await database.db.transaction(SYSTEM, 'authorisation.record', null, (trx) =>
    trx
      .insertInto('authorisations')
      .values({
        userId: actor.userId,
        methodId: method,
        activity,
        validFrom: daysFromToday(database, -100),
        validUntil: daysFromToday(database, 100),
        evidence: 'demonstration of capability',
      })
      .execute(),
  )
}

/** A technician who may measure by the method. */
export async function anAnalyst(
  database: TestDatabase,
  { methodCode = 'fe-phenanthroline', name }: { methodCode?: string; name?: string } = {},
): Promise<Actor> {
  const actor = await aUser(database.db, name === undefined ? {} : { name })
  await authorise(database, actor, { methodCode, activity: 'read' })
  return actor
}

export const PASSPHRASE = 'four grey herons at the weir'
let hash: Promise<string> | undefined

/** A QA manager with a passphrase who may sign calibrations and review results of the method. */
export async function aSigner(
  database: TestDatabase,
  { methodCode = 'fe-phenanthroline', name }: { methodCode?: string; name?: string } = {},
): Promise<Actor> {
  const actor = await aUser(database.db, { role: 'qa-manager', ...(name === undefined ? {} : { name }) })
  hash ??= new PassphraseHasher().hash(PASSPHRASE)
  const passwordHash = await hash
  await database.db.transaction(SYSTEM, 'user.invite', null, (trx) =>
    trx.updateTable('users').set({ passwordHash }).where('id', '=', actor.userId).execute(),
  )
  await authorise(database, actor, { methodCode, activity: 'sign-calibration' })
  await authorise(database, actor, { methodCode, activity: 'review' })
  return actor
}
