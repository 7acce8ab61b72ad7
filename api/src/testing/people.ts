import type { Actor, Role } from '@weirlight/shared/permissions'
import { SYSTEM } from '../platform/database/acting.js'
import type { Database } from '../platform/database/database.js'

let count = 0

/** An active account; a client's utility is made with it when none is given. */
export async function aUser(
  db: Database,
  { role = 'technician', name, clientId }: { role?: Role; name?: string; clientId?: string } = {},
): Promise<Actor> {
  count += 1
  const n = `${process.pid}-${count}`
  const client = role === 'client' ? (clientId ?? (await aClient(db)).id) : null
  return db.transaction(SYSTEM, 'user.invite', null, async (trx) => {
    const row = await trx
      .insertInto('users')
      .values({
        email: `${role}-${n}@people.example`,
        name: name ?? `Test ${role} ${count}`,
        role,
        clientId: client,
        status: 'active',
      })
      .returning(['id', 'name'])
      .executeTakeFirstOrThrow()
    return { userId: row.id, name: row.name, role, clientId: client }
  })
}

export async function aProgramme(db: Database): Promise<{ id: string }> {
  count += 1
  return db.transaction(SYSTEM, 'programme.load', null, (trx) =>
    trx
      .insertInto('programmes')
      .values({
        code: `TEST-${process.pid}-${count}`,
        name: `Test programme ${count}`,
        displayUnit: 'mg/L',
        ties: 'half-even',
        nonDetect: 'less-than-loq',
      })
      .returning('id')
      .executeTakeFirstOrThrow(),
  )
}

export async function aClient(db: Database): Promise<{ id: string; name: string }> {
  const programme = await aProgramme(db)
  count += 1
  return db.transaction(SYSTEM, 'client.create', null, (trx) =>
    trx
      .insertInto('clients')
      .values({
        code: `T${process.pid}-${count}`,
        name: `Test utility ${count}`,
        programmeId: programme.id,
      })
      .returning(['id', 'name'])
      .executeTakeFirstOrThrow(),
  )
}
