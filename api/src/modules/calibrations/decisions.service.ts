import { isDeepStrictEqual } from 'node:util'
import { Injectable } from '@nestjs/common'
import type {
  BodyOf,
  CalibrationView,
  invalidateCalibration,
  sendBackCalibration,
  signCalibration,
  submitCalibration,
} from '@weirlight/shared/contracts'
import type { FieldProblem } from '@weirlight/shared/errors'
import type { Actor } from '@weirlight/shared/permissions'
import { calibrationStates, refuseOwnWork } from '@weirlight/shared/states'
import {
  assertVersion,
  Clock,
  Database,
  notAllowedNow,
  notFound,
  ProblemError,
  SYSTEM,
  type Trx,
} from '../../platform/index.js'
import { InstrumentsService } from '../instruments/index.js'
import { MaterialsService } from '../materials/index.js'
import { AuthorisationService, SigningService } from '../users/index.js'
import type { LockedCalibration } from './calibration-rows.js'
import { assessWhole, signedContent, type CalibrationWhole } from './calibration-whole.js'
import { CalibrationsRepository } from './calibrations.repository.js'
import { CalibrationsService } from './calibrations.service.js'
import { whyNotSubmit } from './submission.js'

/** The moves of a calibration once it is read: submitted, signed, sent back, taken out of force, over. */
@Injectable()
export class DecisionsService {
  constructor(
    private readonly db: Database,
    private readonly clock: Clock,
    private readonly calibrations: CalibrationsRepository,
    private readonly instruments: InstrumentsService,
    private readonly materials: MaterialsService,
    private readonly views: CalibrationsService,
    private readonly signing: SigningService,
    private readonly authorisations: AuthorisationService,
  ) {}

  async submit(actor: Actor, id: string, body: BodyOf<typeof submitCalibration>): Promise<CalibrationView> {
    return this.db.transaction(actor, 'calibration.submit', null, async (trx) => {
      const row = await this.lock(trx, id, body.version)
      const state = calibrationStates.move(row.state, 'submit')
      const whole = await this.views.whole(trx, id)
      const assessment = assessWhole(whole)
      const problems = [
        ...(await this.whyNotBy(trx, actor, whole)),
        ...whyNotSubmit({
          whole,
          assessment,
          instrumentObstacle: await this.instruments.findObstacle(trx, row.instrumentId),
          unusableLots: await this.materials.findUnusable(trx, lotIdsOf(whole)),
          now: this.clock.now(),
        }),
      ]
      if (problems.length > 0) {
        const detail = problems.map(({ message }) => message).join(' ')
        throw new ProblemError('not-allowed-now', detail, { errors: problems })
      }
      await this.calibrations.submit(trx, {
        id,
        state,
        stored: assessment.stored,
        criteria: assessment.criteria,
      })
      return this.views.view(trx, id)
    })
  }

  async sign(actor: Actor, id: string, body: BodyOf<typeof signCalibration>): Promise<CalibrationView> {
    await this.refuseOwn(actor, await this.views.whole(this.db.fresh, id))
    await this.signing.confirmPassphrase(actor, body.passphrase)
    const justification = body.justification.trim()
    return this.db.transaction(actor, 'calibration.sign', justification || null, async (trx) => {
      const row = await this.lock(trx, id, body.version)
      const state = calibrationStates.move(row.state, 'sign')
      const whole = await this.views.whole(trx, id)
      await this.refuseOwn(actor, whole)
      await this.authorisations.requireAuthorised(trx, {
        userId: actor.userId,
        methodId: row.methodId,
        activity: 'sign-calibration',
      })
      requireJustification(whole, justification)
      requireSameFit(whole)
      const validUntil = await this.validUntil(trx, whole)
      await this.putInForce(trx, row)
      await this.calibrations.sign(trx, { id, state, by: actor.userId, validUntil, justification })
      await this.signing.sign(trx, {
        actor,
        thing: 'calibrations',
        thingId: id,
        meaning: 'accepted for use',
        content: signedContent(whole, justification),
      })
      return this.views.view(trx, id)
    })
  }

  async sendBack(
    actor: Actor,
    id: string,
    body: BodyOf<typeof sendBackCalibration>,
  ): Promise<CalibrationView> {
    return this.db.transaction(actor, 'calibration.reject', body.reason, async (trx) => {
      const row = await this.lock(trx, id, body.version)
      const state = calibrationStates.move(row.state, 'reject')
      await this.refuseOwn(actor, await this.views.whole(trx, id))
      await this.calibrations.sendBack(trx, { id, state, by: actor.userId, reason: body.reason })
      return this.views.view(trx, id)
    })
  }

  /** What it touched is in the answer: its batches. Results released under it are for a person to look at. */
  async invalidate(
    actor: Actor,
    id: string,
    body: BodyOf<typeof invalidateCalibration>,
  ): Promise<CalibrationView> {
    return this.db.transaction(actor, 'calibration.invalidate', body.reason, async (trx) => {
      const row = await this.lock(trx, id, body.version)
      const state = calibrationStates.move(row.state, 'invalidate')
      await this.calibrations.end(trx, { id, state, reason: body.reason })
      return this.views.view(trx, id)
    })
  }

  /** @returns how many came to their end */
  async expireOver(): Promise<number> {
    return this.db.transaction(SYSTEM, 'calibration.expire', null, async (trx) => {
      const over = await this.calibrations.lockOver(trx)
      for (const { id, state } of over) {
        await this.calibrations.end(trx, {
          id,
          state: calibrationStates.move(state, 'expire'),
          reason: 'its time was over',
        })
      }
      return over.length
    })
  }

  private async lock(trx: Trx, id: string, version: number): Promise<LockedCalibration> {
    const row = await this.calibrations.lock(trx, id)
    if (!row) throw notFound('calibration')
    await assertVersion(trx, { thing: 'calibrations', id, has: row.version, sent: version })
    return row
  }

  /** Whoever read a standard prepared the calibration too. */
  private async refuseOwn(actor: Actor, { row, readings }: CalibrationWhole): Promise<void> {
    refuseOwnWork({
      actorId: actor.userId,
      preparedBy: [row.preparedBy, ...readings.map(({ readBy }) => readBy)],
      thing: 'calibration',
    })
  }

  private async whyNotBy(
    trx: Trx,
    actor: Actor,
    { row, readings }: CalibrationWhole,
  ): Promise<FieldProblem[]> {
    if (actor.userId !== row.preparedBy && !readings.some(({ readBy }) => readBy === actor.userId)) {
      return [{ path: '', message: `${row.preparedByName} prepared this calibration and submits it.` }]
    }
    const asked = { userId: actor.userId, methodId: row.methodId, activity: 'read' as const }
    try {
      await this.authorisations.requireAuthorised(trx, asked)
      return []
    } catch (error) {
      if (error instanceof ProblemError) return [{ path: '', message: error.detail }]
      throw error
    }
  }

  private async validUntil(trx: Trx, whole: CalibrationWhole): Promise<Date> {
    const lotIds = lotIdsOf(whole)
    const unusable = await this.materials.findUnusable(trx, lotIds)
    if (unusable.length > 0) {
      const whys = unusable.map(({ why }) => why).join(' ')
      throw notAllowedNow(`${whys} It cannot be signed for use any more; send it back.`)
    }
    const maxAgeDays = whole.row.definition.calibrationMaxAgeDays.value
    return this.calibrations.findValidity(trx, { lotIds, maxAgeDays })
  }

  /** One calibration is in force for a method, instrument and cell: the one before ends in the same moment. */
  private async putInForce(trx: Trx, row: LockedCalibration): Promise<void> {
    await this.calibrations.lockPlace(trx, row)
    const before = await this.calibrations.lockInForce(trx, row)
    if (!before) return
    await this.calibrations.replace(trx, {
      id: before.id,
      by: row.id,
      state: calibrationStates.move('in-force', 'replace'),
    })
  }
}

function lotIdsOf({ row, standards }: CalibrationWhole): string[] {
  const ids = [
    row.stockLotId,
    ...row.reagentLots.map(({ id }) => id),
    ...standards.filter(({ removed }) => !removed).map(({ lotId }) => lotId),
  ]
  return [...new Set(ids.filter((id) => id !== null))]
}

function requireJustification({ row }: CalibrationWhole, justification: string): void {
  const failed = row.criteria.filter(({ outcome }) => outcome === 'fail')
  if (failed.length === 0 || justification.length >= 3) return
  const message = `Not met: ${failed.map(({ what }) => what).join('; ')}. Say why it may be used all the same.`
  throw new ProblemError('invalid-input', message, { errors: [{ path: 'justification', message }] })
}

/** The curve is computed once more before it is signed: what is stored must be what the readings give, bit for bit. */
function requireSameFit(whole: CalibrationWhole): void {
  const again: unknown = JSON.parse(JSON.stringify(assessWhole(whole).stored))
  if (isDeepStrictEqual(again, whole.row.stored)) return
  throw notAllowedNow(
    'Computed again from its readings this curve is not the one that was submitted: the calculations have changed since. Send it back; the technician submits a copy.',
  )
}
