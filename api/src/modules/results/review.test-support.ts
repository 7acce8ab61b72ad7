import type { BatchView } from '@weirlight/shared/contracts'
import { PASSPHRASE } from '../../testing/builders/bench.builders.js'
import type { TestApp } from '../../testing/test-app.js'

export const storedResults = (at: TestApp, batchId: string) =>
  at.database.db.fresh
    .selectFrom('results')
    .selectAll()
    .where('batchId', '=', batchId)
    .orderBy('id')
    .execute()

export async function determinationStatesOf(at: TestApp, sampleIds: readonly string[]): Promise<string[]> {
  const rows = await at.database.db.fresh
    .selectFrom('determinations')
    .select('state')
    .where('sampleId', 'in', [...sampleIds])
    .orderBy('id')
    .execute()
  return rows.map(({ state }) => state)
}

export const samplesOf = (batch: BatchView) => batch.rows.filter((row) => row.kind === 'sample')

export const release = (
  batch: BatchView,
  changes: { rerunPositionIds?: string[]; passphrase?: string } = {},
) => ({
  params: { id: batch.id },
  body: { version: batch.version, passphrase: PASSPHRASE, ...changes },
})
