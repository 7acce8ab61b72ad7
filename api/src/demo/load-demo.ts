import type { INestApplicationContext } from '@nestjs/common'
import type { Role } from '@weirlight/shared/permissions'
import { RenderingService } from '../modules/certificates/index.js'
import { Clock, Database, showDay, SYSTEM } from '../platform/index.js'
import type { Chance } from './chance.js'
import type { DemoData } from './demo-data.js'
import { DemoWorld } from './demo-world.js'
import { makeHistoryPartitions } from './demo.repository.js'
import { foundLaboratory } from './found-laboratory.js'
import { leaveWorkOnTheBench } from './leave-work.js'
import type { Incidents, Week } from './week.js'
import { workWeek } from './work-weeks.js'

export interface DemoAccount {
  role: Role
  name: string
  email: string
  passphrase: string
}

const WEEKS = 17
const DAY = 86_400_000

const INCIDENTS: Incidents = {
  lastAnswered: 16,
  returnedCalibration: 4,
  failedVerification: 9,
  excursions: [
    { week: 2, point: 'PH-03', analyte: 'Fe', mgPerL: 0.43 },
    { week: 5, point: 'DM-01', analyte: 'Mn', mgPerL: 0.21 },
    { week: 6, point: 'TH-02', analyte: 'Cu', mgPerL: 1.46 },
    { week: 8, point: 'SP-02', analyte: 'Cr', mgPerL: 0.034 },
    { week: 11, point: 'AV-05', analyte: 'Fe', mgPerL: 0.62 },
    { week: 13, point: 'KR-01', analyte: 'Mn', mgPerL: 0.12 },
    { week: 15, point: 'PH-05', analyte: 'Fe', mgPerL: 3.89 },
    { week: 16, point: 'DM-01', analyte: 'Mn', mgPerL: 0.23 },
  ],
}

/** Four months up to the present day, then the work that lies on the bench this morning. */
export async function loadDemo(
  app: INestApplicationContext,
  given: { data: DemoData; chance: Chance; say: (line: string) => void },
): Promise<DemoAccount[]> {
  const { data, chance, say } = given
  const clock = app.get(Clock)
  const end = clock.now()
  const world = new DemoWorld(app, data, chance, end)
  const weeks = weeksBefore(end, data.laboratory.timeZone)
  const founded = dayBefore(weeks[0]?.days[0] ?? '', 10)
  await app
    .get(Database)
    .transaction(SYSTEM, 'history.partition', null, (trx) =>
      makeHistoryPartitions(trx, { from: founded, to: showDay(end, 'UTC') }),
    )
  await foundLaboratory(world, { founded, expires: dayAfter(showDay(end, 'UTC'), 180) })
  say(`Founded ${data.laboratory.name}: ${world.people.size} people, ${world.points.length} sampling points.`)
  for (const week of weeks) {
    await workWeek(world, week, INCIDENTS)
    await app.get(RenderingService).sweepNow()
    say(`Week ${week.index + 1} of ${weeks.length}, ${week.days[0] ?? ''}`)
  }
  await leaveWorkOnTheBench(world)
  clock.unpin()
  return accountsOf(world)
}

function weeksBefore(end: Date, timeZone: string): Week[] {
  const today = showDay(end, timeZone)
  const weekday = (new Date(`${today}T12:00:00Z`).getUTCDay() + 6) % 7
  const monday = dayBefore(today, weekday)
  return Array.from({ length: WEEKS + 1 }, (_, index) => {
    const first = dayBefore(monday, (WEEKS - index) * 7)
    return { index, days: Array.from({ length: 5 }, (__, day) => dayAfter(first, day)) }
  })
}

const dayAfter = (day: string, days: number) =>
  new Date(Date.parse(`${day}T12:00:00Z`) + days * DAY).toISOString().slice(0, 10)
const dayBefore = (day: string, days: number) => dayAfter(day, -days)

function accountsOf(world: DemoWorld): DemoAccount[] {
  return [...world.people].map(([email, actor]) => ({
    role: actor.role,
    name: actor.name,
    email,
    passphrase: world.passphrases.get(email) ?? '',
  }))
}
