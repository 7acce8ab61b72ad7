import { beforeEach, describe, expect, it } from 'vitest'
import { aPersonWithPassphrase, PASSPHRASE } from '../../testing/accounts.js'
import { useTestApp } from '../../testing/test-app.js'
import { SigningService } from './signing.service.js'
import { UsersModule } from './users.module.js'

const at = useTestApp({ imports: [UsersModule] })
let signing: SigningService
let person: Awaited<ReturnType<typeof aPersonWithPassphrase>>

beforeEach(async () => {
  signing = at().get(SigningService)
  person = await aPersonWithPassphrase(at(), { role: 'qa-manager', name: 'Quentin A' })
})

describe('confirming a passphrase', () => {
  it('passes the right one and names the field of a wrong one', async () => {
    await signing.confirmPassphrase(person, PASSPHRASE)
    await expect(signing.confirmPassphrase(person, 'something else entirely')).rejects.toMatchObject({
      code: 'wrong-passphrase',
      errors: [{ path: 'passphrase' }],
    })
  })

  it('is slowed down after five wrong ones in a row, for that person alone', async () => {
    for (let i = 0; i < 5; i += 1)
      await signing.confirmPassphrase(person, `wrong ${i}`).catch(() => undefined)
    await expect(signing.confirmPassphrase(person, PASSPHRASE)).rejects.toMatchObject({ code: 'throttled' })
    const other = await aPersonWithPassphrase(at(), { role: 'qa-manager' })
    await signing.confirmPassphrase(other, PASSPHRASE)
  })

  it('refuses whoever was disabled meanwhile', async () => {
    await at().database.db.transaction(person, 'user.disable', 'test', (trx) =>
      trx.updateTable('users').set({ status: 'disabled' }).where('id', '=', person.userId).execute(),
    )
    await expect(signing.confirmPassphrase(person, PASSPHRASE)).rejects.toMatchObject({
      code: 'wrong-passphrase',
    })
  })
})

describe('a signature', () => {
  const content = { number: 'K-26-0001', slope: 0.19697, standards: [{ c: '0.10', a: '0.020' }], note: null }

  it('carries name, role, time and the hash of the content, and stands while that is unchanged', async () => {
    const { db } = at().database
    const made = await db.transaction(person, 'calibration.sign', null, (trx) =>
      signing.sign(trx, {
        actor: person,
        thing: 'calibrations',
        thingId: '41',
        meaning: 'accepted for use',
        content,
      }),
    )
    expect(made).toMatchObject({
      printedName: 'Quentin A',
      role: 'QA manager',
      meaning: 'accepted for use',
      stands: true,
    })
    expect(made.contentSha256).toMatch(/^[0-9a-f]{64}$/)
    const reordered = {
      note: null,
      standards: [{ a: '0.020', c: '0.10' }],
      slope: 0.19697,
      number: 'K-26-0001',
    }
    expect((await signing.list(db.read, 'calibrations', '41', reordered))[0]?.stands).toBe(true)
    expect(
      (await signing.list(db.read, 'calibrations', '41', { ...content, slope: 0.19698 }))[0]?.stands,
    ).toBe(false)
    expect(await signing.list(db.read, 'batches', '41')).toEqual([])
  })

  it('cannot be changed or removed by the application', async () => {
    const { db } = at().database
    await db.transaction(person, 'batch.release', null, (trx) =>
      signing.sign(trx, { actor: person, thing: 'batches', thingId: '42', meaning: 'released', content }),
    )
    for (const statement of [`update signatures set printed_name = 'x'`, 'delete from signatures']) {
      await expect(db.pool.query(statement)).rejects.toThrow(/permission denied/)
    }
  })
})
