import { ReceivingService, SamplesService } from '../modules/samples/index.js'
import { DraftsService, DecisionsService } from '../modules/calibrations/index.js'
import type { DemoWorld } from './demo-world.js'
import { draftOf } from './calibrate.js'
import { answerFindings, openRun, readRun } from './run-batches.js'
import { ReviewService } from '../modules/results/index.js'

/**
 * What lies on the bench when the demonstration begins: samples of this morning, some of them not yet accepted, and a
 * calibration that waits for its signature. All of it in the last hours before now.
 */
export async function leaveWorkOnTheBench(world: DemoWorld): Promise<void> {
  const technician = world.first('technician')
  const hoursAgo = (hours: number) => new Date(world.end.getTime() - hours * 3_600_000)
  const calibrated = world.method('Cu')
  world.at(hoursAgo(4))
  const body = draftOf(world, { method: calibrated, start: hoursAgo(4), secondSourceDrift: 1 })
  world.at(hoursAgo(3.7))
  const draft = await world.service(DraftsService).start(technician, body)
  world.at(hoursAgo(3))
  await world.service(DecisionsService).submit(technician, draft.id, { version: draft.version })

  const points = world.chance.shuffle(world.points).slice(0, 7)
  for (const [index, point] of points.entries()) {
    const methods = world.methods.filter(
      (method) => method.analyte !== 'Cr' && point.typical[method.analyte] !== undefined,
    )
    if (methods.length === 0) continue
    const receivedAt = new Date(hoursAgo(2).getTime() + index * 240_000)
    world.at(receivedAt)
    const sample = await world.service(ReceivingService).receive(technician, {
      draftId: world.chance.uuid(),
      clientId: point.clientId,
      pointId: point.id,
      purpose: index === 3 ? 'compliance' : 'operational',
      kind: 'routine',
      collectedAt: new Date(receivedAt.getTime() - 2 * 3_600_000).toISOString(),
      collectedBy:
        world.ofRole('client').find((one) => one.clientId === point.clientId)?.name ?? 'Duty operator',
      receivedAt: receivedAt.toISOString(),
      preservation: index === 5 ? 'none' : 'nitric-acid',
      ph: index === 5 ? '7.2' : '1.6',
      temperatureC: '4.6',
      container: 'plastic',
      filteredInField: false,
      condition: 'Intact, label readable.',
      remarks: '',
      determinations: methods.map((method) => ({ methodId: method.id })),
    })
    if (index >= 4) continue
    world.at(new Date(receivedAt.getTime() + 60_000))
    const isAccepted = index !== 3
    await world.service(SamplesService).decide(technician, sample.id, {
      version: sample.version,
      verdict: isAccepted ? 'accepted' : 'accepted-with-qualification',
      reason: isAccepted ? '' : 'Colour methods are not listed for this purpose; the client was told.',
      clientConsent: isAccepted ? '' : 'By e-mail of this morning, kept with the sample.',
    })
  }

  await leaveRuns(world, hoursAgo)
}

/** One run waits for its review, one is half read. */
async function leaveRuns(world: DemoWorld, hoursAgo: (hours: number) => Date): Promise<void> {
  const [first, second] = world.ofRole('technician')
  if (!first || !second) throw new Error('The demonstration needs two technicians.')
  const iron = world.method('Fe')
  world.at(hoursAgo(1.4))
  const opened = await openRun(world, { method: iron, technician: first, start: hoursAgo(1.4) })
  if (opened) {
    world.at(hoursAgo(1.1))
    const read = await readRun(world, { batch: opened, method: iron, technician: first, hasDrifted: false })
    const answered = await answerFindings(world, { batch: read, technician: first, hasDrifted: false })
    world.at(hoursAgo(0.9))
    await world.service(ReviewService).submit(first, answered.id, { version: answered.version })
  }
  const manganese = world.method('Mn')
  world.at(hoursAgo(0.5))
  const half = await openRun(world, { method: manganese, technician: second, start: hoursAgo(0.5) })
  if (!half) return
  world.at(hoursAgo(0.3))
  await readRun(world, { batch: half, method: manganese, technician: second, hasDrifted: false, upTo: 5 })
}
