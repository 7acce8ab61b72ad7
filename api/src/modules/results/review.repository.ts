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

  /** Everyone whose hand is in the batch, by a reading, a dilution or what was said of a finding: none of them may release it. */
  async hands(db: Executor, batchId: string): Promise<string[]> {
    const { rows } = await sql<{ userId: string }>`
      select read_by as user_id from position_readings where batch_id = ${batchId}
      union select by_id from finding_actions where batch_id = ${batchId}
      union select h.actor_id from positions p join history h
        on h.thing = 'positions' and h.thing_id = p.id and h.operation = 'update'
        where p.batch_id = ${batchId} and h.actor_id is not null`.execute(db)
    return rows.map((row) => row.userId)
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
  async settleSamples(trx: Trx, ids: readonly string[]): Promise<void> {
    if (ids.length === 0) return
    // locked first and counted after: of two batches that end one sample at the same moment, the second sees the first
    await trx
      .selectFrom('samples')
      .select('id')
      .where('id', 'in', [...ids])
      .orderBy('id')
      .forUpdate()
      .execute()
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
      .execute()
    for (const next of ['in-analysis', 'reported'] as const) {
      const moved = locked.filter((row) => row.isOpen === (next === 'in-analysis') && row.state !== next)
      if (moved.length === 0) continue
      await trx
        .updateTable('samples')
        .set((eb) => ({ state: next, version: eb('version', '+', 1) }))
        .where(
          'id',
          'in',
          moved.map(({ id }) => id),
        )
        .execute()
    }
  }
}
