import { getBatch, listBatches } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { anOpenBatch, aReadBatch } from '../../testing/builders/batches.builders.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { BatchesModule } from './index.js'

const at = useTestApp({ imports: [BatchesModule] })

describe('the list', () => {
  it('shows what the runs came to without computing them, and pages by key', async () => {
    await anOpenBatch(at(), { sampleCount: 1 })
    const { batch } = await aReadBatch(at(), { sampleCount: 1 })
    const auditor = await at().as(await aUser(at().database.db, { role: 'auditor' }))
    const first = await auditor.call(listBatches, { query: { limit: 1 } })
    expect(first.items[0]).toMatchObject({
      number: batch.number,
      read: batch.positions,
      aboveLimit: batch.aboveLimit,
      findings: batch.findings,
      samples: 1,
    })
    const next = await auditor.call(listBatches, { query: { limit: 1, after: first.next ?? '' } })
    expect(Number(next.items[0]?.id)).toBeLessThan(Number(batch.id))
    expect((await auditor.call(listBatches, { query: { state: 'released' } })).items).toEqual([])
    expect((await auditor.refused(getBatch, { params: { id: '999999' } })).code).toBe('not-found')
    const client = await at().as(await aUser(at().database.db, { role: 'client' }))
    expect((await client.refused(getBatch, { params: { id: batch.id } })).code).toBe('forbidden')
  })
})
