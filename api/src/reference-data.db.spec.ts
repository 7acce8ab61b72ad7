import { describe, expect, it } from 'vitest'
import { loadReferenceData } from './reference-data.js'
import { useTestDatabase } from './testing/test-database.js'

const database = useTestDatabase()

async function query<T extends object>(text: string): Promise<T[]> {
  return (await database().owner.pool.query<T>(text)).rows
}

describe('loading the catalogue', () => {
  it('writes each row once, with who did it, and leaves alone what is as it should be', async () => {
    const first = await loadReferenceData(database().ownerUrl)
    expect(first).toBeGreaterThan(50)
    expect(await loadReferenceData(database().ownerUrl)).toBe(0)
    const [entries] = await query<{ n: number }>(
      `select count(*)::int as n from history where action = 'reference.load' and actor_name = 'Weirlight'`,
    )
    expect(entries?.n).toBe(first)
    const methods = await query<{ code: string; hold: string; mass: string; active: boolean }>(
      `select code, definition -> 'holdTime' ->> 'code' as hold, definition ->> 'molarMass' as mass, active from methods`,
    )
    expect(methods.length).toBeGreaterThanOrEqual(4)
    expect(methods.every(({ hold, mass }) => hold !== null && Number(mass) > 50)).toBe(true)
    expect(methods.filter(({ active }) => active)).toHaveLength(4)
  })

  it('puts a changed row right under its old id, and keeps what the laboratory chose', async () => {
    await loadReferenceData(database().ownerUrl)
    await database().owner.transaction(
      { userId: null, name: 'Test', role: 'system', clientId: null },
      'test.bend',
      null,
      async (trx) => {
        await trx
          .updateTable('limits')
          .set({ value: '99', definition: '{}' })
          .where('code', '=', 'us-fe-secondary')
          .execute()
        await trx
          .updateTable('methods')
          .set({ active: false, title: 'x', definition: '{}' })
          .where('code', '=', 'fe-phenanthroline')
          .execute()
      },
    )
    const before = await query<{ id: string }>(
      `select id from limits where code = 'us-fe-secondary' order by id`,
    )
    expect(await loadReferenceData(database().ownerUrl)).toBe(before.length + 1)
    const after = await query<{ id: string; value: string; value_text: string }>(
      `select id, value, value_text from limits where code = 'us-fe-secondary' order by id`,
    )
    // 40 CFR 143.3: secondary level for iron 0.3 mg/L
    expect(after).toEqual(before.map(({ id }) => ({ id, value: '0.3', value_text: '0.3' })))
    const [iron] = await query<{ title: string; active: boolean }>(
      `select title, active from methods where code = 'fe-phenanthroline'`,
    )
    expect(iron).toEqual({ title: 'Iron by 1,10-phenanthroline', active: false })
  })
})
