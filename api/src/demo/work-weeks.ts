import { AlertsService } from '../modules/alerts/index.js'
import { calibrate } from './calibrate.js'
import type { DemoWorld } from './demo-world.js'
import { receive } from './receive.js'
import { run } from './run-batches.js'
import type { Incidents, Week } from './week.js'

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
  // the newest alerts are still unanswered when the demonstration begins
  if (week.index < incidents.lastAnswered) await answerAlerts(world, week.days[3] ?? tuesday)
}

async function answerAlerts(world: DemoWorld, day: string): Promise<void> {
  const [manager] = world.ofRole('qa-manager')
  if (!manager) return
  const open = await world.service(AlertsService).list(manager, { state: 'notified', limit: 50 })
  for (const [index, alert] of open.items.entries()) {
    const at = world.minutesLater(world.time(day, '08:40'), index * 7)
    const person = world.ofRole('client').find((one) => one.clientId === alert.clientId)
    if (!person || !world.isPast(world.minutesLater(at, 200))) continue
    world.at(at)
    const answered = await world.service(AlertsService).acknowledge(person, alert.id, {
      version: alert.version,
      note: 'Seen. The point is sampled again this week.',
    })
    world.at(world.minutesLater(at, 180))
    await world.service(AlertsService).close(manager, alert.id, {
      version: answered.version,
      reason: 'Answered by the client; the repeat sample is on the plan.',
    })
  }
}
