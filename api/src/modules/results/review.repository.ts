import { Injectable } from '@nestjs/common'
import { sampleStates, type SampleState } from '@weirlight/shared/states'
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

  /**
   * A sample is reported when nothing of it is left to measure; a rerun takes it back into analysis.
   * @returns those that are reported
   */
  async settleSamples(trx: Trx, ids: readonly string[]): Promise<string[]> {
    const reported: string[] = []
    for (const { id, state, isOpen } of await this.lockSamples(trx, ids)) {
      const next = sampleStates.move(state as SampleState, isOpen ? 'analyse' : 'report')
      if (!isOpen) reported.push(id)
      if (state !== next) await this.moveSample(trx, id, next)
    }
    return reported
  }

  /** @returns whether the sample was in analysis and is reported now */
  async reportIfDone(trx: Trx, id: string): Promise<boolean> {
    const [sample] = await this.lockSamples(trx, [id])
    if (sample?.state !== 'in-analysis' || sample.isOpen || !sample.isReleased) return false
    await this.moveSample(trx, id, sampleStates.move(sample.state, 'report'))
    return true
  }

  /** Locked first and counted after: of two batches that end one sample at the same moment, the second sees the first. */
  private async lockSamples(trx: Trx, ids: readonly string[]) {
    if (ids.length === 0) return []
    await trx
      .selectFrom('samples')
      .select('id')
      .where('id', 'in', [...ids])
      .orderBy('id')
      .forUpdate()
      .execute()
    return trx
      .selectFrom('samples')
      .innerJoin('determinations', 'determinations.sampleId', 'samples.id')
      .select([
        'samples.id',
        'samples.state',
        sql<boolean>`bool_or(determinations.state not in ('released', 'withdrawn'))`.as('isOpen'),
        sql<boolean>`bool_or(determinations.state = 'released')`.as('isReleased'),
      ])
      .where('samples.id', 'in', [...ids])
      .groupBy(['samples.id', 'samples.state'])
      .orderBy('samples.id')
      .execute()
  }

  private async moveSample(trx: Trx, id: string, state: SampleState): Promise<void> {
    await trx
      .updateTable('samples')
      .set((eb) => ({ state, version: eb('version', '+', 1) }))
      .where('id', '=', id)
      .execute()
  }
}
