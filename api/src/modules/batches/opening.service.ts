import { Injectable } from '@nestjs/common'
import type { BatchView, BodyOf, MethodRecord, openBatch } from '@weirlight/shared/contracts'
import type { FieldProblem } from '@weirlight/shared/errors'
import { LIMITS } from '@weirlight/shared/limits'
import type { Actor } from '@weirlight/shared/permissions'
import { determinationStates, MoveRefused, sampleStates, type SampleState } from '@weirlight/shared/states'
import { Clock, Database, invalidInput, ProblemError, type Trx } from '../../platform/index.js'
import { CalibrationsService, type CalibrationInForce } from '../calibrations/index.js'
import { InstrumentsService } from '../instruments/index.js'
import { MaterialsService } from '../materials/index.js'
import { MethodsService } from '../methods/index.js'
import { AuthorisationService } from '../users/index.js'
import { besideSample, CONTROL_REPORTING, reportingOf, rulesOf } from './batch-rules.js'
import type { WaitingToOpen } from './batch-rows.js'
import { BatchesRepository } from './batches.repository.js'
import { BatchesService } from './batches.service.js'
import { OpeningRepository } from './opening.repository.js'
import { PositionsRepository, type NewPosition } from './positions.repository.js'
import { layRun, type LaidPosition } from './run-layout.js'

type Body = BodyOf<typeof openBatch>

/** A run is laid out from waiting determinations; the rules it will be judged by are frozen with it. */
@Injectable()
export class OpeningService {
  constructor(
    private readonly db: Database,
    private readonly clock: Clock,
    private readonly batches: BatchesRepository,
    private readonly opening: OpeningRepository,
    private readonly positions: PositionsRepository,
    private readonly views: BatchesService,
    private readonly calibrations: CalibrationsService,
    private readonly methods: MethodsService,
    private readonly instruments: InstrumentsService,
    private readonly materials: MaterialsService,
    private readonly authorisations: AuthorisationService,
  ) {}

  async openBatch(actor: Actor, body: Body): Promise<BatchView> {
    return this.db.transaction(actor, 'batch.open', null, async (trx) => {
      const before = await this.batches.findByDraft(trx, body.draftId)
      if (before !== undefined) return this.views.view(trx, before, actor)
      const { definition } = await this.methods.get(trx, body.methodId)
      await this.authorisations.requireAuthorised(trx, {
        userId: actor.userId,
        methodId: body.methodId,
        activity: 'read',
      })
      const calibration = await this.calibrations.getInForce(trx, body.calibrationId)
      const laid = layRun({
        determinationIds: body.determinationIds,
        duplicateOf: body.duplicateOf,
        spikeOf: body.spikeOf,
        verificationEvery: definition.acceptance.verificationEvery.value,
        groupSize: definition.acceptance.batchSize.value,
      })
      await this.check(trx, { body, calibration, laid, analyte: definition.analyte })
      const rows = await this.opening.lockWaiting(trx, body.determinationIds)
      // the same form arriving twice at once: the second waited for the first, and answers with its batch
      const twin = await this.batches.findByDraft(trx, body.draftId)
      if (twin !== undefined) return this.views.view(trx, twin, actor)
      const waiting = requireWaiting(rows, body)
      const id = await this.write(trx, { actor, body, calibration, definition, laid, waiting })
      return this.views.settle(trx, { id, state: 'open', actor })
    })
  }

  private async write(
    trx: Trx,
    given: {
      actor: Actor
      body: Body
      calibration: CalibrationInForce
      definition: MethodRecord
      laid: readonly LaidPosition[]
      waiting: ReadonlyMap<string, WaitingToOpen>
    },
  ): Promise<string> {
    const { actor, body, calibration, definition, laid, waiting } = given
    const { row, stored } = calibration
    const stock =
      row.stockLotId === null ? undefined : (await this.materials.listByIds(trx, [row.stockLotId]))[0]
    const id = await this.batches.insert(trx, {
      draftId: body.draftId,
      methodId: body.methodId,
      calibrationId: body.calibrationId,
      instrumentId: row.instrumentId,
      replicates: body.replicates,
      colourStartedAt: body.colourStartedAt,
      note: body.note,
      rules: rulesOf(definition, { ...row, stored }, stock),
      openedBy: actor.userId,
      lotIds: body.reagentLotIds,
    })
    if (id === undefined) throw new ProblemError('already-exists', 'This form has opened a batch already.')
    const rows = laid.map((one, index) => toPosition(one, { body, waiting, definition, position: index + 1 }))
    const isBeside = ({ kind }: { kind: string }) => kind === 'duplicate' || kind === 'spike'
    const first = await this.positions.insert(
      trx,
      id,
      rows.filter((one) => !isBeside(one)),
    )
    const ofDetermination = new Map(first.map((one) => [one.determinationId, one.id]))
    const beside = rows.flatMap((one, index) => {
      const ofPositionId = ofDetermination.get(laid[index]?.ofDeterminationId ?? '') ?? null
      return isBeside(one) ? [{ ...one, ofPositionId }] : []
    })
    await this.positions.insert(trx, id, beside)
    await this.opening.putInBatch(trx, {
      determinationIds: [...waiting.keys()],
      state: determinationStates.move('requested', 'putInBatch'),
      sampleIds: [...new Set([...waiting.values()].map(({ sampleId }) => sampleId))],
      sampleState: sampleStates.move('accepted', 'analyse'),
    })
    return id
  }

  /** Everything about the form itself, at once. */
  private async check(
    trx: Trx,
    given: { body: Body; calibration: CalibrationInForce; laid: readonly LaidPosition[]; analyte: string },
  ): Promise<void> {
    const { body, calibration, laid, analyte } = given
    const problems: FieldProblem[] = []
    const say = (path: string, message: string) => problems.push({ path, message })
    if (calibration.row.methodId !== body.methodId)
      say('calibrationId', `${calibration.row.number} is a calibration of another method.`)
    const obstacle = await this.instruments.findObstacle(trx, calibration.row.instrumentId)
    if (obstacle) say('calibrationId', obstacle)
    if (laid.length > LIMITS.batchPositions) {
      say(
        'determinationIds',
        `With its controls this run has ${laid.length} positions; ${LIMITS.batchPositions} fit.`,
      )
    }
    const unique = new Set(body.determinationIds)
    if (unique.size < body.determinationIds.length)
      say('determinationIds', 'A determination is listed twice.')
    if (body.duplicateOf !== null && !unique.has(body.duplicateOf))
      say('duplicateOf', 'Choose one of the samples of this batch.')
    if (body.spikeOf !== null && !unique.has(body.spikeOf))
      say('spikeOf', 'Choose one of the samples of this batch.')
    if (body.colourStartedAt !== null && Date.parse(body.colourStartedAt) > this.clock.now().getTime())
      say('colourStartedAt', 'The reagent cannot have been added in the future.')
    problems.push(...(await this.checkStandards(trx, { body, calibration, analyte })))
    if (problems.length > 0) throw invalidInput(problems)
  }

  private async checkStandards(
    trx: Trx,
    { body, calibration, analyte }: { body: Body; calibration: CalibrationInForce; analyte: string },
  ): Promise<FieldProblem[]> {
    const problems: FieldProblem[] = []
    const say = (path: string, message: string) => problems.push({ path, message })
    const range = calibration.stored.fit['range'] as { high: number }
    for (const path of ['verificationConcentration', 'controlConcentration'] as const) {
      const value = Number(body[path])
      if (value <= 0) say(path, 'Enter a concentration above zero.')
      else if (value > range.high) say(path, `The curve ends at ${range.high} mg/L: choose one it can read.`)
    }
    const asked: [string, string, 'standard' | 'reagent'][] = [
      ...(body.verificationLotId
        ? [['verificationLotId', body.verificationLotId, 'standard'] as [string, string, 'standard']]
        : []),
      ...(body.controlLotId
        ? [['controlLotId', body.controlLotId, 'standard'] as [string, string, 'standard']]
        : []),
      ...body.reagentLotIds.map((lot, index): [string, string, 'reagent'] => [
        `reagentLotIds.${index}`,
        lot,
        'reagent',
      ]),
    ]
    const ids = [...new Set(asked.map(([, id]) => id))]
    const lots = new Map((await this.materials.listByIds(trx, ids)).map((lot) => [lot.id, lot]))
    const unusable = new Map((await this.materials.findUnusable(trx, ids)).map(({ id, why }) => [id, why]))
    for (const [path, id, wanted] of asked) {
      const lot = lots.get(id)
      const why = unusable.get(id)
      if (why) say(path, why)
      else if (lot && (lot.kind === 'reagent') !== (wanted === 'reagent'))
        say(path, `${lot.number} is not a ${wanted}.`)
      else if (lot && wanted === 'standard' && lot.analyte !== analyte)
        say(path, `${lot.number} does not hold ${analyte}.`)
    }
    return problems
  }
}

/** Somebody else may have been faster: each determination that is gone is named. */
function requireWaiting(locked: readonly WaitingToOpen[], body: Body): Map<string, WaitingToOpen> {
  const rows = new Map(locked.map((row) => [row.id, row]))
  const problems = body.determinationIds.flatMap((id, index): FieldProblem[] => {
    const message = whyNotTake(rows.get(id), body.methodId)
    return message === undefined ? [] : [{ path: `determinationIds.${index}`, message }]
  })
  const [first] = problems
  if (!first) return rows
  const more = problems.length === 1 ? '' : ` The same holds for ${problems.length - 1} more.`
  throw new ProblemError('not-allowed-now', `${first.message}${more}`, { errors: problems })
}

function whyNotTake(row: WaitingToOpen | undefined, methodId: string): string | undefined {
  if (!row) return 'There is no such determination.'
  if (row.batchNumber !== null) return `${row.sampleNumber} is already in batch ${row.batchNumber}.`
  if (row.methodId !== methodId) return `${row.sampleNumber} is to be determined by another method.`
  try {
    determinationStates.move(row.state as 'requested', 'putInBatch')
    sampleStates.move(row.sampleState as SampleState, 'analyse')
    return undefined
  } catch (error) {
    if (error instanceof MoveRefused) return `${row.sampleNumber}: ${error.message}`
    throw error
  }
}

function toPosition(
  laid: LaidPosition,
  given: {
    body: Body
    waiting: ReadonlyMap<string, WaitingToOpen>
    definition: MethodRecord
    position: number
  },
): NewPosition {
  const { body, waiting, definition, position } = given
  const sample = waiting.get(laid.determinationId ?? laid.ofDeterminationId ?? '')
  const reporting = sample ? reportingOf(sample, definition.analyte) : CONTROL_REPORTING
  const isVerification = laid.kind === 'verification'
  const isControl = laid.kind === 'control'
  return {
    position,
    kind: laid.kind,
    determinationId: laid.determinationId,
    ofPositionId: null,
    expected: isVerification ? body.verificationConcentration : isControl ? body.controlConcentration : null,
    added: laid.kind === 'spike' ? body.spikeAdded : null,
    lotId: isVerification ? body.verificationLotId : isControl ? body.controlLotId : null,
    limits: laid.kind === 'sample' ? (sample?.limits ?? []) : [],
    reporting: laid.kind === 'sample' || !sample ? reporting : besideSample(reporting),
  }
}
