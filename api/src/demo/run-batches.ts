import type { BatchView, PositionView } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { OpeningService, RunningService } from '../modules/batches/index.js'
import { CalibrationsService } from '../modules/calibrations/index.js'
import { ReviewService } from '../modules/results/index.js'
import { SamplesService } from '../modules/samples/index.js'
import type { ToCalibrate } from './calibrate.js'
import type { DemoMethod, DemoWorld } from './demo-world.js'
import { pickManager, pickTechnician } from './people.js'

export async function run(world: DemoWorld, given: ToCalibrate & { nextDay: string }): Promise<void> {
  const { method, day, order, week, incidents } = given
  const start = world.minutesLater(world.time(day, '12:30'), order * 45)
  if (!world.isPast(world.minutesLater(start, 130))) return
  world.at(start)
  const technician = pickTechnician(world, order + week.index)
  const opened = await openRun(world, { method, technician, start })
  if (!opened) return
  const hasDrifted = week.index === incidents.failedVerification && method.analyte === 'Fe'
  world.at(world.minutesLater(start, method.definition.development.minMinutes + 1))
  const read = await readRun(world, { batch: opened, method, technician, hasDrifted })
  const answered = await answerFindings(world, { batch: read, technician, hasDrifted })
  world.at(world.minutesLater(start, 60))
  const submitted = await world
    .service(ReviewService)
    .submit(technician, answered.id, { version: answered.version })
  const reviewAt = world.minutesLater(world.time(given.nextDay, '09:30'), order * 12)
  if (!world.isPast(reviewAt)) return
  world.at(reviewAt)
  const manager = pickManager(world, order + week.index)
  await world.service(ReviewService).release(manager, submitted.id, {
    version: submitted.version,
    passphrase: world.passphraseOf(manager),
    rerunPositionIds: hasDrifted ? lastSamples(submitted) : [],
    comment: hasDrifted ? 'Samples after the last good verification are measured again.' : '',
  })
}

/** Positions behind the last verification that held. */
function lastSamples(batch: BatchView): string[] {
  const held = batch.rows
    .filter((row) => row.kind === 'verification' && row.assessment.qcPassed === true)
    .at(-1)
  return batch.rows
    .filter((row) => row.kind === 'sample' && row.position > (held?.position ?? 0))
    .map((row) => row.id)
}

export async function readRun(
  world: DemoWorld,
  given: { batch: BatchView; method: DemoMethod; technician: Actor; hasDrifted: boolean; upTo?: number },
): Promise<BatchView> {
  const { batch, method, technician } = given
  const last = batch.rows.filter((row) => row.kind === 'verification').at(-1)?.position
  const held = batch.rows.filter((row) => row.kind === 'verification').at(-2)?.position ?? 0
  const readings = batch.rows.slice(0, given.upTo).flatMap((row) => {
    const drift = given.hasDrifted && row.position > held && last !== undefined ? 0.82 : 1
    return [1, 2].map((replicate) => ({
      positionId: row.id,
      replicate,
      absorbance: world.absorbance(method, levelAt(world, { row, batch, method }), drift),
      supersedes: null,
    }))
  })
  return world.service(RunningService).saveReadings(technician, batch.id, { source: 'typed', readings })
}

function levelAt(
  world: DemoWorld,
  given: { row: PositionView; batch: BatchView; method: DemoMethod },
): number {
  const { row, batch } = given
  if (row.expected !== null) return Number(row.expected)
  const sample = row.kind === 'sample' ? row : batch.rows.find((other) => other.id === row.ofPositionId)
  return (world.truth.get(sample?.determinationId ?? '') ?? 0) / Number(row.dilution)
}

export async function answerFindings(
  world: DemoWorld,
  given: { batch: BatchView; technician: Actor; hasDrifted: boolean },
): Promise<BatchView> {
  let { batch } = given
  for (const finding of batch.findingsList.filter(
    (one) => one.severity === 'failed' && one.action === null,
  )) {
    batch = await world.service(RunningService).recordAction(given.technician, batch.id, {
      findingId: finding.id,
      kind: given.hasDrifted ? 'rerun' : 'explained',
      text: given.hasDrifted
        ? 'Lamp warmed up again and zeroed; the samples since the last good verification go into a new run.'
        : 'Looked at the tubes and the record; single deviation, the other checks of the run hold.',
    })
  }
  return batch
}

async function inForce(world: DemoWorld, method: DemoMethod): Promise<string | undefined> {
  const { items } = await world
    .service(CalibrationsService)
    .list({ methodId: method.id, state: 'in-force', limit: 5 })
  return items[0]?.id
}

/** A run of what waits for the method, or nothing where nothing waits or no calibration is in force. */
export async function openRun(
  world: DemoWorld,
  { method, technician, start }: { method: DemoMethod; technician: Actor; start: Date },
): Promise<BatchView | undefined> {
  const { items } = await world.service(SamplesService).waiting({ methodId: method.id })
  const calibration = await inForce(world, method)
  if (items.length === 0 || !calibration) return undefined
  const middle = method.standards[4] ?? '1'
  return world.service(OpeningService).openBatch(technician, {
    draftId: world.chance.uuid(),
    methodId: method.id,
    calibrationId: calibration,
    replicates: 2,
    determinationIds: items.slice(0, 20).map((item) => item.id),
    verificationConcentration: middle,
    verificationLotId: method.workingId,
    controlConcentration: method.standards[3] ?? middle,
    controlLotId: method.controlId,
    duplicateOf: null,
    spikeOf: null,
    spikeAdded: null,
    reagentLotIds: method.reagentIds,
    colourStartedAt: start.toISOString(),
    note: '',
  })
}
