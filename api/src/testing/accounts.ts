import type { Actor } from '@weirlight/shared/permissions'
import { PassphraseHasher } from '../modules/users/index.js'
import { aUser } from './people.js'
import type { TestApp } from './test-app.js'

/** What every account of `aPersonWithPassphrase` signs in and signs with. */
export const PASSPHRASE = 'seven brown otters on a ferry'

let hash: Promise<string> | undefined

/** An active account that can sign in and sign. */
export async function aPersonWithPassphrase(
  app: TestApp,
  options: Parameters<typeof aUser>[1] = {},
): Promise<Actor & { email: string }> {
  const actor = await aUser(app.database.db, options)
  hash ??= new PassphraseHasher().hash(PASSPHRASE)
  const passwordHash = await hash
  const { email } = await app.database.db.transaction(actor, 'user.accept-invitation', null, (trx) =>
    trx
      .updateTable('users')
      .set({ passwordHash })
      .where('id', '=', actor.userId)
      .returning('email')
      .executeTakeFirstOrThrow(),
  )
  return { ...actor, email }
}
