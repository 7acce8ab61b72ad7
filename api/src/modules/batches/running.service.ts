import { Injectable } from '@nestjs/common'
import type {
  BatchView,
  BodyOf,
  addVerification,
  changeBatch,
  changePosition,
  recordFindingAction,
  saveReadings,
} from '@weirlight/shared/contracts'
import { LIMITS } from '@weirlight/shared/limits'
import type { Actor } from '@weirlight/shared/permissions'
import { batchStates } from '@weirlight/shared/states'
import {
  assertVersion,
  Clock,
  Database,
  invalidInput,
  notAllowedNow,
  notFound,
  type Trx,
} from '../../platform/index.js'
import { CalibrationsService } from '../calibrations/index.js'
import { InstrumentsService } from '../instruments/index.js'
import { MaterialsService } from '../materials/index.js'
import { AuthorisationService } from '../users/index.js'
import { assessBatch, countingReadings, type BatchWhole } from './assess-batch.js'
import { CONTROL_REPORTING } from './batch-rules.js'
import type { BatchStateName, LockedBatch } from './batch-rows.js'
import { BatchesRepository } from './batches.repository.js'
import { BatchesService } from './batches.service.js'
import { cellKey, planReadings, type Entry } from './new-readings.js'
import { PositionsRepository } from './positions.repository.js'

export interface ReadingsToSave {
  source: 'typed' | 'pasted' | 'file'
  uploadId: string | null
  entries: readonly Entry[]
}

/** Work at the run: readings, dilutions, the reagent's time, more verifications, what was done about findings. */
@Injectable()
export class RunningService {
  constructor(
    private readonly db: Database,
    private readonly clock: Clock,
    private readonly batches: BatchesRepository,
    private readonly positions: PositionsRepository,
    private readonly views: BatchesService,
    private readonly calibrations: CalibrationsService,
    private readonly instruments: InstrumentsService,
    private readonly materials: MaterialsService,
    private readonly authorisations: AuthorisationService,
  ) {}

  async saveReadings(actor: Actor, id: string, body: BodyOf<typeof saveReadings>): Promise<BatchView> {
    const reasons = [...new Set(body.readings.flatMap(({ reason }) => reason ?? []))]
    return this.db.transaction(actor, 'batch.read', reasons.join('; ') || null, async (trx) =>
      this.enter(trx, actor, { id, source: body.source, uploadId: null, entries: body.readings }),
    )
  }

  /** Inside the caller's transaction: all of the entries, or none. */
  async enter(
    trx: Trx,
    actor: Actor,
    { id, ...readings }: ReadingsToSave & { id: string },
  ): Promise<BatchView> {
    const { batch, state } = await this.lockToWork(trx, id)
    const whole = await this.views.whole(trx, id)
    await this.requireFit(trx, { actor, batch, whole })
    const planned = planReadings({
      entries: readings.entries,
      positions: whole.positions,
      current: currentCells(whole),
      replicates: batch.replicates,
      actorId: actor.userId,
      isFile: readings.source === 'file',
    })
    if (planned.length === 0) return this.views.view(trx, id, actor)
    const { source, uploadId } = readings
    await this.positions.insertReadings(trx, planned, { batchId: id, readBy: actor.userId, source, uploadId })
    return this.views.settle(trx, { id, state, actor, laid: whole })
  }

  async changePosition(
    actor: Actor,
    positionId: string,
    body: BodyOf<typeof changePosition>,
  ): Promise<BatchView> {
    return this.db.transaction(actor, 'position.change', body.reason ?? null, async (trx) => {
      const id = await this.positions.findBatchId(trx, positionId)
      const { state } = await this.lockToWork(trx, id)
      const whole = await this.views.whole(trx, id)
      const row = whole.positions.find((one) => one.id === positionId)
      if (!row) throw notFound('position')
      await assertVersion(trx, { thing: 'positions', id: positionId, has: row.version, sent: body.version })
      if (body.dilution !== row.dilution) {
        if (!['sample', 'duplicate', 'spike'].includes(row.kind)) {
          throw invalidInput([{ path: 'dilution', message: 'Blanks and standards are read undiluted.' }])
        }
        const isRead = whole.readings.some((reading) => reading.positionId === positionId)
        if (isRead && !body.reason) {
          throw invalidInput([
            { path: 'reason', message: 'It was read already: say why the dilution changes.' },
          ])
        }
      }
      await this.positions.change(trx, { id: positionId, dilution: body.dilution, note: body.note })
      return this.views.settle(trx, { id, state, actor })
    })
  }

  async changeBatch(actor: Actor, id: string, body: BodyOf<typeof changeBatch>): Promise<BatchView> {
    return this.db.transaction(actor, 'batch.change', null, async (trx) => {
      const { state } = await this.lockToWork(trx, id, body.version)
      const whole = await this.views.whole(trx, id)
      this.requireColourTime(whole, body.colourStartedAt)
      await this.batches.change(trx, { id, colourStartedAt: body.colourStartedAt, note: body.note })
      return this.views.settle(trx, { id, state, actor })
    })
  }

  async addVerification(actor: Actor, id: string, body: BodyOf<typeof addVerification>): Promise<BatchView> {
    return this.db.transaction(actor, 'batch.verify', null, async (trx) => {
      const { state } = await this.lockToWork(trx, id, body.version)
      const { positions } = await this.views.whole(trx, id)
      const before = positions.findLast(({ kind }) => kind === 'verification')
      const last = positions.at(-1)?.position ?? 0
      if (!before) throw notAllowedNow('This batch has no verification standard to repeat.')
      if (last + 2 > LIMITS.batchPositions) {
        throw notAllowedNow(`A run has ${LIMITS.batchPositions} positions at most. Open another batch.`)
      }
      const plain = {
        determinationId: null,
        ofPositionId: null,
        added: null,
        limits: [],
        reporting: CONTROL_REPORTING,
      }
      await this.positions.insert(trx, id, [
        {
          ...plain,
          position: last + 1,
          kind: 'verification',
          expected: before.expected,
          lotId: before.lotId,
        },
        { ...plain, position: last + 2, kind: 'blank', expected: null, lotId: null },
      ])
      return this.views.settle(trx, { id, state, actor })
    })
  }

  async recordAction(actor: Actor, id: string, body: BodyOf<typeof recordFindingAction>): Promise<BatchView> {
    return this.db.transaction(actor, 'finding.act', body.text, async (trx) => {
      const { state } = await this.lockToWork(trx, id)
      const { findings } = assessBatch(await this.views.whole(trx, id))
      if (!findings.some((finding) => finding.id === body.findingId)) {
        throw invalidInput([
          { path: 'findingId', message: 'This finding is not there any more. Load the batch again.' },
        ])
      }
      const { findingId, kind, text } = body
      await this.batches.insertFindingAction(trx, { batchId: id, findingId, kind, text, byId: actor.userId })
      return this.views.settle(trx, { id, state, actor })
    })
  }

  private async lockToWork(
    trx: Trx,
    id: string,
    version?: number,
  ): Promise<{ batch: LockedBatch; state: BatchStateName }> {
    const batch = await this.batches.lock(trx, id)
    if (version !== undefined)
      await assertVersion(trx, { thing: 'batches', id, has: batch.version, sent: version })
    return { batch, state: batchStates.move(batch.state, 'read') }
  }

  /** No reading by whom, on what or with what is not fit today. */
  private async requireFit(
    trx: Trx,
    { actor, batch, whole }: { actor: Actor; batch: LockedBatch; whole: BatchWhole },
  ): Promise<void> {
    await this.authorisations.requireAuthorised(trx, {
      userId: actor.userId,
      methodId: batch.methodId,
      activity: 'read',
    })
    await this.calibrations.requireUsable(trx, batch.calibrationId)
    const obstacle = await this.instruments.findObstacle(trx, batch.instrumentId)
    if (obstacle) throw notAllowedNow(obstacle)
    const lotIds = [
      ...whole.batch.reagentLots.map(({ id }) => id),
      ...whole.positions.flatMap(({ lotId }) => lotId ?? []),
    ]
    const [unusable] = await this.materials.findUnusable(trx, [...new Set(lotIds)])
    if (unusable) throw notAllowedNow(unusable.why)
  }

  private requireColourTime({ readings }: BatchWhole, colourStartedAt: string | null): void {
    if (colourStartedAt === null) return
    const at = Date.parse(colourStartedAt)
    const say = (message: string) => {
      throw invalidInput([{ path: 'colourStartedAt', message }])
    }
    if (at > this.clock.now().getTime()) say('The reagent cannot have been added in the future.')
    const [first] = readings
    if (first && at > first.readAt.getTime()) say('The first reading was taken before that: check the time.')
  }
}

function currentCells({ readings }: BatchWhole) {
  const cells = [...countingReadings(readings).values()].flat()
  return new Map(cells.map((reading) => [cellKey(reading.positionId, reading.replicate), reading]))
}
