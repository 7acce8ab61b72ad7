import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import { notFound, type Executor, type Trx } from '../../platform/index.js'

/** The batch, its determinations and samples as their states move at submission, return and release. */
@Injectable()
export class ReviewRepository {
  async lockBatch(trx: Trx, id: string) {
    const row = await trx
      .selectFrom('batches')
      .select(['id', 'number', 'state', 'version', 'methodId', 'calibrationId', 'openedBy', 'submittedBy'])
      .where('id', '=', id)
      .forUpdate()
      .executeTakeFirst()
    if (!row) throw notFound('batch')
    return row
  }

  /** Everyone whose hand is in the batch: none of them may release it. */
  async hands(db: Executor, batchId: string): Promise<string[]> {
    const rows = await db
      .selectFrom('positionReadings')
      .select('readBy')
      .distinct()
      .where('batchId', '=', batchId)
      .execute()
    return rows.map((row) => row.readBy)
  }

  /** What a result needs to know of its determination; locked, in one order, so that two batches never wait for each other. */
  async lockDeterminations(trx: Trx, ids: readonly string[]) {
    if (ids.length === 0) return []
    return trx
      .selectFrom('determinations')
      .innerJoin('samples', 'samples.id', 'determinations.sampleId')
      .select([
        'determinations.id',
        'determinations.state',
        'determinations.sampleId',
        'determinations.clientId',
        'determinations.analyte',
        'determinations.form',
        'samples.samplingPointId',
        'samples.collectedAt',
      ])
      .where('determinations.id', 'in', [...ids])
      .orderBy('determinations.id')
      .forUpdate('determinations')
      .execute()
  }

  async moveDeterminations(
    trx: Trx,
    { ids, state }: { ids: readonly string[]; state: string },
  ): Promise<void> {
    if (ids.length === 0) return
    await trx
      .updateTable('determinations')
      .set((eb) => ({ state, version: eb('version', '+', 1) }))
      .where('id', 'in', [...ids])
      .execute()
  }

  async submit(trx: Trx, { id, userId, at }: { id: string; userId: string; at: Date }): Promise<void> {
    await trx
      .updateTable('batches')
      .set((eb) => ({
        state: 'submitted',
        submittedBy: userId,
        submittedAt: at,
        returnedReason: '',
        version: eb('version', '+', 1),
      }))
      .where('id', '=', id)
      .execute()
  }

  async return(
    trx: Trx,
    { id, userId, reason }: { id: string; userId: string; reason: string },
  ): Promise<void> {
    await trx
      .updateTable('batches')
      .set((eb) => ({
        state: 'returned',
        returnedBy: userId,
        returnedReason: reason,
        version: eb('version', '+', 1),
      }))
      .where('id', '=', id)
      .execute()
  }

  async release(
    trx: Trx,
    { id, userId, at, comment }: { id: string; userId: string; at: Date; comment: string },
  ): Promise<void> {
    await trx
      .updateTable('batches')
      .set((eb) => ({
        state: 'released',
        reviewedBy: userId,
        reviewedAt: at,
        releasedBy: userId,
        releasedAt: at,
        reviewComment: comment,
        version: eb('version', '+', 1),
      }))
      .where('id', '=', id)
      .execute()
  }

  /** A sample is reported when nothing of it is left to measure; a rerun takes it back into analysis. */
  async settleSamples(trx: Trx, ids: readonly string[]): Promise<{ id: string; isReported: boolean }[]> {
    if (ids.length === 0) return []
    const locked = await trx
      .selectFrom('samples')
      .select((eb) => [
        'samples.id',
        'samples.state',
        eb
          .exists(
            eb
              .selectFrom('determinations')
              .whereRef('determinations.sampleId', '=', 'samples.id')
              .where('determinations.state', 'not in', ['released', 'withdrawn'])
              .select('determinations.id'),
          )
          .as('isOpen'),
      ])
      .where('samples.id', 'in', [...ids])
      .orderBy('samples.id')
      .forUpdate()
      .execute()
    for (const { id, state, isOpen } of locked) {
      const next = isOpen ? 'in-analysis' : 'reported'
      if (state === next) continue
      await trx
        .updateTable('samples')
        .set({ state: next, version: sql`version + 1` })
        .where('id', '=', id)
        .execute()
    }
    return locked.map(({ id, isOpen }) => ({ id, isReported: !isOpen }))
  }
}
