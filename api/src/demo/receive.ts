import { ReceivingService, SamplesService } from '../modules/samples/index.js'
import type { DemoMethod, DemoPoint, DemoWorld } from './demo-world.js'
import { clientPerson, pickTechnician } from './people.js'
import type { Incidents, Week } from './week.js'

/** Points that a week visits: each about every second week. */
const SAMPLES_A_WEEK = 16

export async function receive(
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
    await world.service(SamplesService).decide(technician, sample.id, {
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
