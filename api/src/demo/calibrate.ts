import type { CalibrationView } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { DecisionsService, DraftsService } from '../modules/calibrations/index.js'
import type { DemoMethod, DemoWorld } from './demo-world.js'
import { pickManager, pickTechnician } from './people.js'
import type { Incidents, Week } from './week.js'

type Draft = Parameters<DraftsService['start']>[1]

export interface ToCalibrate {
  method: DemoMethod
  day: string
  order: number
  week: Week
  incidents: Incidents
}

export async function calibrate(world: DemoWorld, given: ToCalibrate): Promise<void> {
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
