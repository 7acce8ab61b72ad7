import { Injectable } from '@nestjs/common'
import type { BatchView, QueryOf, listBatches } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import {
  Clock,
  Database,
  idFromCursor,
  notFound,
  toPage,
  type AnswerOf,
  type Executor,
  type Trx,
} from '../../platform/index.js'
import { SigningService } from '../users/index.js'
import { assessBatch, type AssessedBatch, type BatchWhole } from './assess-batch.js'
import type { BatchStateName } from './batch-rows.js'
import { toRow, toView } from './batch-view.js'
import { BatchesRepository } from './batches.repository.js'
import { PositionsRepository } from './positions.repository.js'
import { SignedResultsRepository, type SignedResult } from './signed-results.repository.js'

/** Batches as they are read: lists, and one whole with every position judged by the engine. */
@Injectable()
export class BatchesService {
  constructor(
    private readonly db: Database,
    private readonly clock: Clock,
    private readonly batches: BatchesRepository,
    private readonly positions: PositionsRepository,
    private readonly signing: SigningService,
    private readonly signed: SignedResultsRepository,
  ) {}

  async list(query: QueryOf<typeof listBatches>): Promise<AnswerOf<typeof listBatches>> {
    const { after, limit, ...filter } = query
    const rows = await this.batches.list(this.db.read, { ...filter, before: idFromCursor(after), limit })
    return toPage(rows, { limit, key: (row) => [row.id], item: toRow })
  }

  /** Opening the page tells others who is there. */
  async open(actor: Actor, id: string): Promise<BatchView> {
    const whole = await this.whole(this.db.fresh, id)
    await this.batches.watch(this.db.fresh, id, actor.userId)
    return this.compose(this.db.fresh, { whole, assessed: assessBatch(whole), actor })
  }

  /** For those above, inside their transaction as well. @throws not-found */
  async view(db: Executor, id: string, actor: Actor): Promise<BatchView> {
    const whole = await this.whole(db, id)
    return this.compose(db, { whole, assessed: assessBatch(whole), actor })
  }

  async whole(db: Executor, id: string): Promise<BatchWhole> {
    const batch = await this.batches.find(db, id)
    if (!batch) throw notFound('batch')
    return {
      batch,
      positions: await this.positions.list(db, id),
      readings: await this.positions.listReadings(db, id),
    }
  }

  /**
   * After work at the bench: judges the run as it is now, keeps its counts, and shows it. `laid` spares reading what the
   * caller has read under the batch's lock and has not changed: everything but the readings.
   */
  async settle(
    trx: Trx,
    { id, state, actor, laid }: { id: string; state: BatchStateName; actor: Actor; laid?: BatchWhole },
  ): Promise<BatchView> {
    const whole = laid
      ? { ...laid, readings: await this.positions.listReadings(trx, id) }
      : await this.whole(trx, id)
    const assessed = assessBatch(whole)
    const version = await this.batches.settle(trx, { id, state, ...assessed.summary })
    return this.compose(trx, {
      whole: { ...whole, batch: { ...whole.batch, state, version } },
      assessed,
      actor,
    })
  }

  /** What a release signs: every number of the batch as it stands now. */
  async signedContent(db: Executor, id: string): Promise<SignedResult[]> {
    return this.signed.list(db, id)
  }

  private async signatures(
    db: Executor,
    { id, state }: { id: string; state: BatchStateName },
  ): Promise<BatchView['signatures']> {
    const content = state === 'released' ? await this.signedContent(db, id) : undefined
    return this.signing.list(db, 'batches', id, content)
  }

  private async compose(
    db: Executor,
    { whole, assessed, actor }: { whole: BatchWhole; assessed: AssessedBatch; actor: Actor },
  ): Promise<BatchView> {
    const { id, openedAt } = whole.batch
    return toView({
      whole,
      assessed,
      dilutionChanges: await this.positions.listDilutionChanges(db, {
        positionIds: whole.positions.map((position) => position.id),
        since: openedAt,
      }),
      signatures: await this.signatures(db, whole.batch),
      alsoHere: await this.batches.listWatchers(db, id, actor.userId),
      at: this.clock.now(),
    })
  }
}
