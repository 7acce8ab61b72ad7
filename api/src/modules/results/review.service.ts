import { Injectable } from '@nestjs/common'
import { ENGINE_VERSION } from '@weirlight/shared/assay'
import type {
  BatchView,
  BodyOf,
  PositionView,
  releaseBatch,
  returnBatch,
  submitBatch,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { batchStates, determinationStates, refuseOwnWork, resultStates } from '@weirlight/shared/states'
import {
  assertVersion,
  Clock,
  Database,
  DomainEvents,
  HandlesEvent,
  invalidInput,
  notAllowedNow,
  type Trx,
} from '../../platform/index.js'
import { BatchesService } from '../batches/index.js'
import { CalibrationsService } from '../calibrations/index.js'
import { determinationWithdrawn } from '../samples/index.js'
import { AuthorisationService, SigningService } from '../users/index.js'
import { batchReleased, samplesReported } from './events.js'
import { ResultsRepository, type ResultToStore } from './results.repository.js'
import { ReviewRepository } from './review.repository.js'

type Determination = Awaited<ReturnType<ReviewRepository['lockDeterminations']>>[number]

/** From a finished run to released results: submission computes them, review signs them or sends them back. */
@Injectable()
export class ReviewService {
  constructor(
    private readonly db: Database,
    private readonly clock: Clock,
    private readonly events: DomainEvents,
    private readonly batches: BatchesService,
    private readonly calibrations: CalibrationsService,
    private readonly authorisations: AuthorisationService,
    private readonly signing: SigningService,
    private readonly review: ReviewRepository,
    private readonly results: ResultsRepository,
  ) {}

  async submit(actor: Actor, id: string, body: BodyOf<typeof submitBatch>): Promise<BatchView> {
    return this.db.transaction(actor, 'batch.submit', null, async (trx) => {
      const batch = await this.review.lockBatch(trx, id)
      await assertVersion(trx, { thing: 'batches', id, has: batch.version, sent: body.version })
      batchStates.move(batch.state as BatchView['state'], 'submit')
      await this.authorisations.requireAuthorised(trx, {
        userId: actor.userId,
        methodId: batch.methodId,
        activity: 'read',
      })
      await this.calibrations.requireUsable(trx, batch.calibrationId)
      const view = await this.batches.view(trx, id, actor)
      requireComplete(view)
      const samples = view.rows.filter((row) => row.kind === 'sample')
      const determinations = await this.lockDeterminations(trx, samples)
      for (const determination of determinations.values()) {
        determinationStates.move(determination.state as 'in-batch', 'measure')
      }
      await this.results.store(
        trx,
        samples.map((row) => toStore({ row, view, determination: found(determinations, row) })),
        this.clock.now(),
      )
      await this.review.moveDeterminations(trx, { ids: [...determinations.keys()], state: 'measured' })
      await this.review.submit(trx, { id, userId: actor.userId, at: this.clock.now() })
      return this.batches.view(trx, id, actor)
    })
  }

  async return(actor: Actor, id: string, body: BodyOf<typeof returnBatch>): Promise<BatchView> {
    return this.db.transaction(actor, 'batch.return', body.reason, async (trx) => {
      const batch = await this.review.lockBatch(trx, id)
      await assertVersion(trx, { thing: 'batches', id, has: batch.version, sent: body.version })
      batchStates.move(batch.state as BatchView['state'], 'return')
      refuseOwnWork({ actorId: actor.userId, preparedBy: [batch.submittedBy ?? ''], thing: 'batch' })
      const results = await this.results.lockOfBatch(trx, id)
      await this.review.moveDeterminations(trx, {
        ids: results.map((row) => row.determinationId),
        state: 'in-batch',
      })
      await this.review.return(trx, { id, userId: actor.userId, reason: body.reason })
      return this.batches.view(trx, id, actor)
    })
  }

  async release(actor: Actor, id: string, body: BodyOf<typeof releaseBatch>): Promise<BatchView> {
    await this.signing.confirmPassphrase(actor, body.passphrase)
    return this.db.transaction(
      actor,
      'batch.release',
      body.comment === '' ? null : body.comment,
      async (trx) => {
        const batch = await this.review.lockBatch(trx, id)
        await assertVersion(trx, { thing: 'batches', id, has: batch.version, sent: body.version })
        batchStates.move(batch.state as BatchView['state'], 'release')
        const hands = await this.review.hands(trx, id)
        refuseOwnWork({
          actorId: actor.userId,
          preparedBy: [batch.submittedBy ?? '', ...hands],
          thing: 'batch',
        })
        await this.authorisations.requireAuthorised(trx, {
          userId: actor.userId,
          methodId: batch.methodId,
          activity: 'review',
        })
        const results = await this.results.lockOfBatch(trx, id)
        const reruns = this.rerunsOf(results, body.rerunPositionIds)
        const released = results.filter((row) => !reruns.has(row.id))
        for (const row of results) {
          resultStates.move(row.state as 'measured', reruns.has(row.id) ? 'setAside' : 'release')
        }
        await this.review.lockDeterminations(
          trx,
          results.map((row) => row.determinationId),
        )
        const at = this.clock.now()
        const rerunRows = results.filter((row) => reruns.has(row.id))
        await this.results.release(trx, { ids: released.map((row) => row.id), userId: actor.userId, at })
        await this.results.setAside(trx, { ids: rerunRows.map((row) => row.id), userId: actor.userId, at })
        await this.review.moveDeterminations(trx, {
          ids: released.map((row) => row.determinationId),
          state: 'released',
        })
        await this.review.moveDeterminations(trx, {
          ids: rerunRows.map((row) => row.determinationId),
          state: 'requested',
        })
        await this.review.release(trx, { id, userId: actor.userId, at, comment: body.comment })
        const sampleIds = [...new Set(results.map((row) => row.sampleId))]
        const reported = await this.review.settleSamples(trx, sampleIds)
        const content = await this.batches.signedContent(trx, id)
        for (const meaning of ['reviewed', 'released'] as const) {
          await this.signing.sign(trx, { actor, thing: 'batches', thingId: id, meaning, content })
        }
        await this.events.publish(trx, batchReleased, {
          batchId: id,
          resultIds: released.map((row) => row.id),
          actor,
        })
        await this.events.publish(trx, samplesReported, { sampleIds: reported, actor })
        return this.batches.view(trx, id, actor)
      },
    )
  }

  /** A sample whose last open determination is withdrawn after the others were released has nothing left to wait for. */
  @HandlesEvent(determinationWithdrawn)
  async reportRest(trx: Trx, { sampleId, actor }: { sampleId: string; actor: Actor }): Promise<void> {
    if (await this.review.reportIfDone(trx, sampleId)) {
      await this.events.publish(trx, samplesReported, { sampleIds: [sampleId], actor })
    }
  }

  private rerunsOf(
    results: readonly { id: string; positionId: string }[],
    positionIds: readonly string[],
  ): Set<string> {
    const byPosition = new Map(results.map((row) => [row.positionId, row.id]))
    const unknown = positionIds.findIndex((positionId) => !byPosition.has(positionId))
    if (unknown >= 0) {
      throw invalidInput([
        { path: `rerunPositionIds.${unknown}`, message: 'This position carries no result of this batch.' },
      ])
    }
    return new Set(positionIds.flatMap((positionId) => byPosition.get(positionId) ?? []))
  }

  private async lockDeterminations(
    trx: Trx,
    samples: readonly PositionView[],
  ): Promise<Map<string, Determination>> {
    const rows = await this.review.lockDeterminations(
      trx,
      samples.flatMap((row) => row.determinationId ?? []),
    )
    return new Map(rows.map((row) => [row.id, row]))
  }
}

function found(determinations: Map<string, Determination>, row: PositionView): Determination {
  const determination = determinations.get(row.determinationId ?? '')
  if (!determination) throw new Error(`Position ${row.id} has no determination.`)
  return determination
}

/** Nothing is submitted half read, and no failed check in silence. */
function requireComplete(view: BatchView): void {
  const unread = view.rows.filter((row) => row.readings.length < view.replicates)
  const silent = view.findingsList.filter(
    (finding) => finding.severity === 'failed' && finding.action === null,
  )
  const incalculable = view.rows.filter(
    (row) => row.kind === 'sample' && row.readings.length > 0 && row.assessment.concentration === null,
  )
  const reasons = [
    ...unread.map((row) => `Position ${row.position} is not fully read.`),
    ...incalculable.map((row) => `Position ${row.position}: ${row.assessment.explanation}`),
    ...silent.map((finding) => `Say what was done about: ${finding.what}`),
  ]
  if (reasons.length > 0) throw notAllowedNow(`This batch cannot be submitted yet. ${reasons.join(' ')}`)
}

function toStore({
  row,
  view,
  determination,
}: {
  row: PositionView
  view: BatchView
  determination: Determination
}): ResultToStore {
  return {
    clientId: determination.clientId,
    sampleId: determination.sampleId,
    determinationId: determination.id,
    batchId: view.id,
    positionId: row.id,
    calibrationId: view.calibrationId,
    methodId: view.methodId,
    samplingPointId: determination.samplingPointId,
    analyte: determination.analyte,
    form: determination.form,
    collectedAt: determination.collectedAt,
    assessment: { ...row.assessment, flags: [...row.assessment.flags, ...flagsOf(row, view)] },
    inputs: {
      readings: row.readings.map(({ id, replicate, absorbance }) => ({ id, replicate, absorbance })),
      dilution: row.dilution,
      rules: view.rules,
      limits: row.limits,
      reporting: row.reporting,
    },
    engineVersion: ENGINE_VERSION,
  }
}

/** What the run itself says of a result: a failed check of its batch, a reading out of its time. */
function flagsOf(row: PositionView, view: BatchView): string[] {
  const own = view.findingsList
    .filter((finding) => finding.positionId === row.id)
    .map((finding) => finding.id.split('-')[0] ?? '')
  const known = ['holding', 'early', 'late', 'spread']
  const hasFailedControl = view.findingsList.some(
    (finding) =>
      finding.severity === 'failed' && finding.positionId !== row.id && finding.id.startsWith('control-'),
  )
  return [
    ...own
      .filter((code) => known.includes(code))
      .map(
        (code) =>
          ({
            holding: 'holding-time-exceeded',
            early: 'read-early',
            late: 'read-late',
            spread: 'readings-apart',
          })[code] ?? code,
      ),
    ...(hasFailedControl ? ['quality-control-failed'] : []),
  ]
}
