import { Injectable } from '@nestjs/common'
import type {
  BodyOf,
  CalibrationView,
  copyCalibration,
  saveCalibration,
  startCalibration,
} from '@weirlight/shared/contracts'
import type { FieldProblem } from '@weirlight/shared/errors'
import type { Actor } from '@weirlight/shared/permissions'
import { calibrationStates } from '@weirlight/shared/states'
import { assertVersion, Database, invalidInput, notFound, type Trx } from '../../platform/index.js'
import { InstrumentsService } from '../instruments/index.js'
import { MaterialsService } from '../materials/index.js'
import { MethodsService } from '../methods/index.js'
import { savedStandards } from './calibration-whole.js'
import { CalibrationsRepository, type Draft } from './calibrations.repository.js'
import { CalibrationsService } from './calibrations.service.js'
import { planStandards } from './standards-change.js'
import { StandardsRepository } from './standards.repository.js'

type Body = Omit<BodyOf<typeof startCalibration>, 'draftId' | 'methodId'>

const DEFAULT_REASON = 'corrected in the draft'

/** Calibrations while they are worked on: started, saved as often as one likes, begun anew from a copy. */
@Injectable()
export class DraftsService {
  constructor(
    private readonly db: Database,
    private readonly calibrations: CalibrationsRepository,
    private readonly standards: StandardsRepository,
    private readonly instruments: InstrumentsService,
    private readonly materials: MaterialsService,
    private readonly methods: MethodsService,
    private readonly views: CalibrationsService,
  ) {}

  async start(actor: Actor, body: BodyOf<typeof startCalibration>): Promise<CalibrationView> {
    return this.db.transaction(actor, 'calibration.start', null, async (trx) => {
      const before = await this.calibrations.findByDraft(trx, body.draftId)
      if (before !== undefined) return this.views.view(trx, before)
      const method = await this.methods.get(trx, body.methodId)
      if (!method.active)
        throw invalidInput([{ path: 'methodId', message: `${method.title} is no longer in use.` }])
      await this.checkReferences(trx, body, method.analyte)
      const id = await this.insert(trx, actor, {
        body,
        draftId: body.draftId,
        methodId: body.methodId,
        copiedFrom: null,
      })
      return this.views.view(trx, id)
    })
  }

  async save(actor: Actor, id: string, body: BodyOf<typeof saveCalibration>): Promise<CalibrationView> {
    return this.db.transaction(actor, 'calibration.save', body.reason ?? null, async (trx) => {
      const row = await this.calibrations.lock(trx, id)
      if (!row) throw notFound('calibration')
      await assertVersion(trx, { thing: 'calibrations', id, has: row.version, sent: body.version })
      calibrationStates.move(row.state, 'save')
      const method = await this.methods.get(trx, row.methodId)
      await this.checkReferences(trx, body, method.analyte)
      await this.calibrations.update(trx, id, draftOf(body))
      await this.calibrations.setLots(trx, id, body.reagentLotIds)
      await this.saveStandards(trx, actor, { id, body, reason: body.reason ?? DEFAULT_REASON })
      return this.views.view(trx, id)
    })
  }

  /** The set-up, never the readings: those belong to the hour they were taken in. */
  async copy(
    actor: Actor,
    id: string,
    { draftId }: BodyOf<typeof copyCalibration>,
  ): Promise<CalibrationView> {
    return this.db.transaction(actor, 'calibration.copy', null, async (trx) => {
      const before = await this.calibrations.findByDraft(trx, draftId)
      if (before !== undefined) return this.views.view(trx, before)
      const { row, standards } = await this.views.whole(trx, id)
      const body: Body = {
        ...row,
        reagentLotIds: row.reagentLots.map((lot) => lot.id),
        colourStartedAt: null,
        temperatureC: '',
        note: '',
        standards: standards
          .filter(({ removed }) => !removed)
          .map(({ role, concentration, lotId }) => ({
            role,
            concentration,
            lotId,
            readings: [''],
            leftOutReason: '',
          })),
      }
      const made = await this.insert(trx, actor, { body, draftId, methodId: row.methodId, copiedFrom: id })
      return this.views.view(trx, made)
    })
  }

  private async insert(
    trx: Trx,
    actor: Actor,
    draft: { body: Body; draftId: string; methodId: string; copiedFrom: string | null },
  ): Promise<string> {
    const { body, draftId, methodId, copiedFrom } = draft
    const id = await this.calibrations.insert(trx, {
      ...draftOf(body),
      draftId,
      methodId,
      preparedBy: actor.userId,
      copiedFrom,
    })
    if (id === undefined) {
      // the same form arriving twice at once: the other one made it
      const made = await this.calibrations.findByDraft(trx, draftId)
      if (made === undefined) throw new Error('The calibration was not written.')
      return made
    }
    await this.calibrations.setLots(trx, id, body.reagentLotIds)
    await this.saveStandards(trx, actor, { id, body, reason: DEFAULT_REASON })
    return id
  }

  private async saveStandards(
    trx: Trx,
    actor: Actor,
    { id, body, reason }: { id: string; body: Body; reason: string },
  ): Promise<void> {
    const whole = await this.views.whole(trx, id)
    const plan = planStandards(savedStandards(whole), body.standards)
    await this.standards.apply(trx, plan, { calibrationId: id, readBy: actor.userId, reason })
  }

  /** What the form names must be there and hold the right metal; whether it may be used is asked at submission. */
  private async checkReferences(trx: Trx, body: Body, analyte: string): Promise<void> {
    const asked: [string, string][] = [
      ...(body.stockLotId === null ? [] : [['stockLotId', body.stockLotId] as [string, string]]),
      ...body.reagentLotIds.map((lot, index): [string, string] => [`reagentLotIds.${index}`, lot]),
      ...body.standards.flatMap(({ lotId }, index): [string, string][] =>
        lotId === null ? [] : [[`standards.${index}.lotId`, lotId]],
      ),
    ]
    const found = await this.materials.listByIds(trx, [...new Set(asked.map(([, lot]) => lot))])
    const lots = new Map(found.map((lot) => [lot.id, lot]))
    const problems = asked.flatMap(([path, lotId]): FieldProblem[] => {
      const lot = lots.get(lotId)
      if (!lot) return [{ path, message: 'There is no such lot.' }]
      const isReagent = path.startsWith('reagent')
      if (isReagent !== (lot.kind === 'reagent')) {
        return [
          {
            path,
            message: isReagent ? `${lot.number} is not a reagent.` : `${lot.number} is not a standard.`,
          },
        ]
      }
      return isReagent || lot.analyte === analyte
        ? []
        : [{ path, message: `${lot.number} does not hold ${analyte}.` }]
    })
    const instruments = await this.instruments.listAll(trx)
    if (!instruments.some(({ id }) => id === body.instrumentId))
      problems.push({ path: 'instrumentId', message: 'There is no such instrument.' })
    if (problems.length > 0) throw invalidInput(problems)
  }
}

function draftOf(body: Body): Draft {
  const { instrumentId, model, weighting, stockLotId, temperatureC, note } = body
  const colourStartedAt = body.colourStartedAt === null ? null : new Date(body.colourStartedAt).toISOString()
  // 1, 1.0 and 1.00 cm are one cell: the place a calibration is in force for
  const cellPathCm = String(Number(body.cellPathCm))
  return { instrumentId, cellPathCm, model, weighting, stockLotId, colourStartedAt, temperatureC, note }
}
