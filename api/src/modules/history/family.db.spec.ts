import { listHistory } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { aReadBatch } from '../../testing/builders/batches.builders.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'

const at = useTestApp()

describe('the history of a number', () => {
  it('of a batch holds its positions and readings; of a sample, those of its own positions alone', async () => {
    const { batch } = await aReadBatch(at(), { sampleCount: 2 })
    await aReadBatch(at(), { sampleCount: 1 })
    const agent = await at().as(await aUser(at().database.db, { role: 'auditor' }))
    const family = async (number: string) => {
      const { items } = await agent.call(listHistory, { query: { number, limit: 200 } })
      const idsOf = (thing: string) =>
        [...new Set(items.filter((item) => item.thing === thing).map(({ thingId }) => thingId))].sort()
      return { items, idsOf }
    }

    const ofBatch = await family(batch.number)
    expect(ofBatch.idsOf('batches')).toEqual([batch.id])
    expect(ofBatch.idsOf('positions')).toEqual(batch.rows.map(({ id }) => id).sort())
    expect(ofBatch.idsOf('position_readings')).toHaveLength(batch.rows.length * 2)

    const row = batch.rows.find(({ kind }) => kind === 'sample')
    const { rows } = await at().database.owner.pool.query<{ number: string; id: string }>(
      `select s.number, s.id from samples s join determinations d on d.sample_id = s.id
       join positions p on p.determination_id = d.id where p.id = $1`,
      [row?.id],
    )
    const ofSample = await family(rows[0]?.number ?? '')
    expect(ofSample.idsOf('samples')).toEqual([rows[0]?.id])
    expect(ofSample.idsOf('positions')).toEqual([row?.id])
    expect(ofSample.idsOf('position_readings')).toHaveLength(2)
    expect(ofSample.idsOf('determinations')).toHaveLength(1)
  })
})
