import type { BatchView, CalibrationView, PositionView } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { AlertsService } from '../modules/alerts/index.js'
import { OpeningService, RunningService } from '../modules/batches/index.js'
import { CalibrationsService, DecisionsService, DraftsService } from '../modules/calibrations/index.js'
import { ReviewService } from '../modules/results/index.js'
import { ReceivingService, SamplesService } from '../modules/samples/index.js'
import type { DemoMethod, DemoPoint, DemoWorld } from './demo-world.js'

type Draft = Parameters<DraftsService['start']>[1]

/** Points that a week visits: each about every second week. */
const SAMPLES_A_WEEK = 16

export interface Week {
  index: number
  /** five working days, Monday first, `2026-08-03` */
  days: readonly string[]
}

/** What happens once in the four months, so that the record shows how slips are handled. */
export interface Incidents {
  /** week in which the second source of the manganese calibration does not agree */
  returnedCalibration: number
  /** week in which the last verification of the iron run drifts away */
  failedVerification: number
  /** points and weeks with levels far above the usual */
  excursions: readonly { week: number; point: string; analyte: DemoMethod['analyte']; mgPerL: number }[]
}

/** A week of the laboratory: calibrate where due, receive, run, review, answer. */
export async function workWeek(world: DemoWorld, week: Week, incidents: Incidents): Promise<void> {
  const [monday = '', tuesday = ''] = week.days
  if (week.index % 4 === 0) {
    for (const [order, method] of world.methods.entries())
      await calibrate(world, { method, day: monday, order, week, incidents })
  }
  await receive(world, { day: tuesday, week, incidents })
  for (const [order, method] of world.methods.entries()) {
    await run(world, { method, day: tuesday, nextDay: week.days[2] ?? tuesday, order, week, incidents })
  }
  await answerAlerts(world, week.days[3] ?? tuesday)
}

/* ------------------------------------------------------------- calibrations */

interface ToCalibrate {
  method: DemoMethod
  day: string
  order: number
  week: Week
  incidents: Incidents
}

async function calibrate(world: DemoWorld, given: ToCalibrate): Promise<void> {
  const { method, day, order } = given
  const technician = pickTechnician(world, order + given.week.index)
  const start = world.time(day, `${String(9 + order).padStart(2, '0')}:05`)
  if (!world.isPast(world.minutesLater(start, 300))) return
  const isBad = given.week.index === given.incidents.returnedCalibration && method.analyte === 'Mn'
  const first = await prepare(world, { ...given, technician, start, secondSourceDrift: isBad ? 0.86 : 1 })
  const manager = pickManager(world, order)
  if (!isBad) return sign(world, { calibration: first, manager, at: world.minutesLater(start, 260) })
  world.at(world.minutesLater(start, 200))
  await world.service(DecisionsService).sendBack(manager, first.id, {
    version: first.version,
    reason: 'The second source reads 14 % low. Make fresh second-source standards and calibrate again.',
  })
  const again = world.minutesLater(start, 230)
  const second = await prepare(world, {
    ...given,
    technician,
    start: again,
    secondSourceDrift: 1,
    copyOf: first.id,
  })
  await sign(world, { calibration: second, manager, at: world.minutesLater(again, 120) })
}

async function prepare(
  world: DemoWorld,
  given: ToCalibrate & { technician: Actor; start: Date; secondSourceDrift: number; copyOf?: string },
): Promise<CalibrationView> {
  const { method, technician, start } = given
  const drafts = world.service(DraftsService)
  world.at(start)
  const body = draftOf(world, given)
  const copied = given.copyOf
    ? await drafts.copy(technician, given.copyOf, { draftId: world.chance.uuid() })
    : undefined
  world.at(world.minutesLater(start, method.definition.development.minMinutes + 8))
  const { draftId, methodId, ...saved } = body
  const draft = copied
    ? await drafts.save(technician, copied.id, { version: copied.version, ...saved })
    : await drafts.start(technician, { draftId, methodId, ...saved })
  world.at(world.minutesLater(start, 90))
  return world.service(DecisionsService).submit(technician, draft.id, { version: draft.version })
}

export function draftOf(
  world: DemoWorld,
  given: { method: DemoMethod; start: Date; secondSourceDrift: number },
): Draft {
  const { method } = given
  const readings = (concentration: number, drift = 1) =>
    Array.from({ length: 3 }, () => world.absorbance(method, concentration, drift))
  const middle = method.standards[4] ?? '1'
  return {
    draftId: world.chance.uuid(),
    methodId: method.id,
    instrumentId: method.instrumentId,
    cellPathCm: method.cellPathCm,
    model: 'linear',
    weighting: 'none',
    stockLotId: method.stockId,
    reagentLotIds: method.reagentIds,
    colourStartedAt: given.start.toISOString(),
    temperatureC: world.chance.between(20, 22.5).toFixed(1),
    note:
      given.secondSourceDrift === 1
        ? ''
        : 'Second source read low twice; submitted so that the decision is on record.',
    standards: [
      ...method.standards.map((concentration) => ({
        role: 'standard' as const,
        concentration,
        lotId: concentration === '0' ? null : method.workingId,
        readings: readings(Number(concentration)),
        leftOutReason: '',
      })),
      {
        role: 'second-source' as const,
        concentration: middle,
        lotId: method.secondSourceId,
        readings: readings(Number(middle), given.secondSourceDrift),
        leftOutReason: '',
      },
    ],
  }
}

async function sign(
  world: DemoWorld,
  given: { calibration: CalibrationView; manager: Actor; at: Date },
): Promise<void> {
  const { calibration, manager } = given
  if (!world.isPast(given.at)) return
  world.at(given.at)
  const hasFailed = calibration.criteria.some((criterion) => criterion.outcome === 'fail')
  await world.service(DecisionsService).sign(manager, calibration.id, {
    version: calibration.version,
    passphrase: world.passphraseOf(manager),
    justification: hasFailed
      ? 'Looked through with the technician; the deviation is small against the use of the curve.'
      : '',
  })
}

/* ----------------------------------------------------------------- samples */

async function receive(
  world: DemoWorld,
  given: { day: string; week: Week; incidents: Incidents },
): Promise<void> {
  const { week, incidents } = given
  const wanted = incidents.excursions.filter((one) => one.week === week.index).map((one) => one.point)
  const due = world.points.filter((_, index) => (index + week.index) % 3 !== 0)
  const chosen = [
    ...world.points.filter((point) => wanted.includes(point.code)),
    ...world.chance.shuffle(due).filter((point) => !wanted.includes(point.code)),
  ].slice(0, SAMPLES_A_WEEK)
  for (const [index, point] of chosen.entries()) {
    const receivedAt = world.minutesLater(world.time(given.day, '10:00'), index * 4)
    if (!world.isPast(world.minutesLater(receivedAt, 5))) return
    await receiveOne(world, { point, receivedAt, index, ...given })
  }
}

async function receiveOne(
  world: DemoWorld,
  given: { point: DemoPoint; receivedAt: Date; index: number; week: Week; incidents: Incidents },
): Promise<void> {
  const { point, receivedAt, index } = given
  const technician = pickTechnician(world, index)
  const methods = world.methods.filter((method) => point.typical[method.analyte] !== undefined)
  // chromium(VI) must not be acidified; the other metals must: two bottles, two samples
  const groups = [
    methods.filter((method) => method.analyte === 'Cr'),
    methods.filter((method) => method.analyte !== 'Cr'),
  ]
  for (const [side, group] of groups.entries()) {
    if (group.length === 0) continue
    const isBuffered = side === 0
    const at = world.minutesLater(receivedAt, side * 2)
    const collectedAt = world.minutesLater(at, -world.chance.whole(70, 210))
    world.at(at)
    const sample = await world.service(ReceivingService).receive(technician, {
      draftId: world.chance.uuid(),
      clientId: point.clientId,
      pointId: point.id,
      purpose: 'operational',
      kind: 'routine',
      collectedAt: collectedAt.toISOString(),
      collectedBy: clientPerson(world, point.clientId),
      receivedAt: at.toISOString(),
      preservation: isBuffered ? 'ammonium-sulfate-buffer' : 'nitric-acid',
      ph: isBuffered
        ? world.chance.between(9.35, 9.65).toFixed(1)
        : world.chance.between(1.4, 1.9).toFixed(1),
      temperatureC: world.chance.between(3.2, 5.8).toFixed(1),
      container: 'plastic',
      filteredInField: false,
      condition: 'Intact, label readable.',
      remarks: '',
      determinations: group.map((method) => ({ methodId: method.id })),
    })
    for (const detail of sample.details) {
      const method = group.find((one) => one.id === detail.methodId)
      if (method) world.truth.set(detail.id, trueLevel(world, { ...given, method }))
    }
    world.at(world.minutesLater(at, 1))
    await world
      .service(SamplesService)
      .decide(technician, sample.id, {
        version: sample.version,
        verdict: 'accepted',
        reason: '',
        clientConsent: '',
      })
  }
}

function trueLevel(
  world: DemoWorld,
  given: { point: DemoPoint; method: DemoMethod; week: Week; incidents: Incidents },
): number {
  const { point, method, week, incidents } = given
  const excursion = incidents.excursions.find(
    (one) => one.week === week.index && one.point === point.code && one.analyte === method.analyte,
  )
  if (excursion) return excursion.mgPerL
  return (point.typical[method.analyte] ?? 0) * Math.exp(world.chance.normal(0.14))
}

/* --------------------------------------------------------------------- runs */

async function run(world: DemoWorld, given: ToCalibrate & { nextDay: string }): Promise<void> {
  const { method, day, order, week, incidents } = given
  const start = world.minutesLater(world.time(day, '12:30'), order * 45)
  if (!world.isPast(world.minutesLater(start, 130))) return
  world.at(start)
  const { items } = await world.service(SamplesService).waiting({ methodId: method.id })
  const calibration = await inForce(world, method)
  if (items.length === 0 || !calibration) return
  const technician = pickTechnician(world, order + week.index)
  const middle = method.standards[4] ?? '1'
  const opened = await world.service(OpeningService).openBatch(technician, {
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

async function readRun(
  world: DemoWorld,
  given: { batch: BatchView; method: DemoMethod; technician: Actor; hasDrifted: boolean },
): Promise<BatchView> {
  const { batch, method, technician } = given
  const last = batch.rows.filter((row) => row.kind === 'verification').at(-1)?.position
  const held = batch.rows.filter((row) => row.kind === 'verification').at(-2)?.position ?? 0
  const readings = batch.rows.flatMap((row) => {
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

async function answerFindings(
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

/* ------------------------------------------------------------------- alerts */

async function answerAlerts(world: DemoWorld, day: string): Promise<void> {
  const [manager] = world.ofRole('qa-manager')
  if (!manager) return
  const open = await world.service(AlertsService).list(manager, { state: 'notified', limit: 50 })
  for (const [index, alert] of open.items.entries()) {
    const at = world.minutesLater(world.time(day, '08:40'), index * 7)
    const person = world.ofRole('client').find((one) => one.clientId === alert.clientId)
    if (!person || !world.isPast(world.minutesLater(at, 200))) continue
    world.at(at)
    const answered = await world
      .service(AlertsService)
      .acknowledge(person, alert.id, {
        version: alert.version,
        note: 'Seen. The point is sampled again this week.',
      })
    world.at(world.minutesLater(at, 180))
    await world
      .service(AlertsService)
      .close(manager, alert.id, {
        version: answered.version,
        reason: 'Answered by the client; the repeat sample is on the plan.',
      })
  }
}

/* ------------------------------------------------------------------- people */

function pickTechnician(world: DemoWorld, turn: number): Actor {
  const technicians = world.ofRole('technician')
  const found = technicians[turn % technicians.length]
  if (!found) throw new Error('The demonstration needs technicians.')
  return found
}

function pickManager(world: DemoWorld, turn: number): Actor {
  const managers = world.ofRole('qa-manager')
  const found = managers[turn % managers.length]
  if (!found) throw new Error('The demonstration needs QA managers.')
  return found
}

function clientPerson(world: DemoWorld, clientId: string): string {
  return world.ofRole('client').find((one) => one.clientId === clientId)?.name ?? 'Duty operator'
}
