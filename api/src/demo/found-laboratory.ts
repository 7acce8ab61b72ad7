import type { Role } from '@weirlight/shared/permissions'
import { ClientsService, ContactsService } from '../modules/clients/index.js'
import { InstrumentsService } from '../modules/instruments/index.js'
import { LaboratoryService } from '../modules/laboratory/index.js'
import { ProgrammesService } from '../modules/programmes/index.js'
import { FirstAdministratorService, InvitationsService, UsersService } from '../modules/users/index.js'
import { Database, SYSTEM } from '../platform/index.js'
import type { DemoWorld } from './demo-world.js'
import { newPassphrase } from './passphrase.js'
import { stockTheShelves } from './stock-the-shelves.js'

/** What an instrument is held against before it measures: `spread` is the standard deviation of what it shows, `digits` how it shows it. */
const CHECKS = [
  {
    kind: 'wavelength',
    reference: 'Holmium oxide solution, 536.5 nm band',
    nominal: '536.5',
    tolerance: '1.0',
    unit: 'nm',
    spread: 0.15,
    digits: 1,
  },
  {
    kind: 'photometric',
    reference: 'Neutral filter set 4',
    nominal: '0.500',
    tolerance: '0.005',
    unit: 'A',
    spread: 0.001,
    digits: 3,
  },
  {
    kind: 'baseline',
    reference: 'Water against water, ten minutes',
    nominal: '0.000',
    tolerance: '0.002',
    unit: 'A',
    spread: 0.0004,
    digits: 4,
  },
] as const

/** Days before the first week: people, clients, instruments and the first lots. */
export async function foundLaboratory(
  world: DemoWorld,
  days: { founded: string; expires: string },
): Promise<void> {
  world.at(world.time(days.founded, '08:00'))
  await appointPeople(world, days)
  await registerClients(world)
  const instruments = await setUpInstruments(world, days)
  await stockTheShelves(world, { ...days, instruments })
  await authorise(world, days)
}

async function appointPeople(world: DemoWorld, days: { founded: string }): Promise<void> {
  const { data } = world
  await world
    .service(Database)
    .transaction(SYSTEM, 'laboratory.found', null, (trx) =>
      world.service(LaboratoryService).setUp(trx, data.laboratory),
    )
  const [administrator] = data.people.filter((one) => one.role === 'administrator')
  if (!administrator) throw new Error('The demonstration needs an administrator.')
  const link = await world.service(FirstAdministratorService).invite({
    email: administrator.email,
    name: administrator.name,
    laboratory: { name: data.laboratory.name, timeZone: data.laboratory.timeZone },
  })
  await accept(world, { ...administrator, link, clientId: null })
  for (const one of data.people.filter((other) => other !== administrator))
    await invite(world, { ...one, clientId: null })
  world.at(world.time(days.founded, '09:00'))
}

async function invite(
  world: DemoWorld,
  given: { email: string; name: string; role: Role; clientId: string | null },
): Promise<void> {
  const administrator = world.first('administrator')
  const { link } = await world
    .service(Database)
    .transaction(administrator, 'user.invite', null, (trx) =>
      world.service(UsersService).inviteIn(trx, administrator, given),
    )
  await accept(world, { ...given, link })
}

async function accept(
  world: DemoWorld,
  given: { email: string; name: string; role: Role; clientId: string | null; link: string },
): Promise<void> {
  const passphrase = newPassphrase()
  const token = given.link.split('/').at(-1) ?? ''
  await world.service(InvitationsService).accept(token, { name: given.name, passphrase })
  const { items } = await world.service(UsersService).list()
  const user = items.find((one) => one.email === given.email)
  if (!user) throw new Error(`${given.email} did not arrive.`)
  world.passphrases.set(given.email, passphrase)
  world.people.set(given.email, {
    userId: user.id,
    name: given.name,
    role: given.role,
    clientId: given.clientId,
  })
}

async function registerClients(world: DemoWorld): Promise<void> {
  const manager = world.first('qa-manager')
  const programmes = (await world.service(ProgrammesService).list()).items
  for (const client of world.data.clients) {
    const programme = programmes.find((one) => one.code === client.programme)
    if (!programme) throw new Error(`There is no programme ${client.programme}.`)
    const { code, name, systemId, address, agencyName, agencyPhone } = client
    const added = await world
      .service(ClientsService)
      .add(manager, { code, name, systemId, address, programmeId: programme.id, agencyName, agencyPhone })
    for (const contact of client.contacts)
      await world.service(ContactsService).add(manager, added.id, contact)
    for (const { code: pointCode, name: pointName, kind, typicalMgPerL } of client.points) {
      const view = await world
        .service(ClientsService)
        .addPoint(manager, added.id, { code: pointCode, name: pointName, kind })
      const point = view.points.find((one) => one.code === pointCode)
      if (point)
        world.points.push({ id: point.id, clientId: added.id, code: pointCode, typical: typicalMgPerL })
    }
    await invite(world, { ...client.user, role: 'client', clientId: added.id })
  }
}

async function setUpInstruments(world: DemoWorld, days: { expires: string }): Promise<string[]> {
  const technician = world.first('technician')
  const service = world.service(InstrumentsService)
  const ids: string[] = []
  for (const instrument of world.data.instruments) {
    const { id } = await service.add(technician, instrument)
    ids.push(id)
    for (const { spread, digits, ...check } of CHECKS) {
      await service.recordCheck(technician, id, {
        ...check,
        found: (Number(check.nominal) + world.chance.normal(spread)).toFixed(digits),
        nextDueOn: days.expires,
        note: '',
      })
    }
  }
  return ids
}

async function authorise(world: DemoWorld, days: { founded: string; expires: string }): Promise<void> {
  const administrator = world.first('administrator')
  const given = { validFrom: days.founded, validUntil: days.expires }
  for (const method of world.methods) {
    for (const technician of world.ofRole('technician')) {
      await world.service(UsersService).authorise(administrator, technician.userId, {
        ...given,
        methodId: method.id,
        activity: 'read',
        evidence: 'Four replicates of the control material within limits; training record.',
      })
    }
    for (const manager of world.ofRole('qa-manager')) {
      for (const activity of ['read', 'sign-calibration', 'review'] as const) {
        await world.service(UsersService).authorise(administrator, manager.userId, {
          ...given,
          methodId: method.id,
          activity,
          evidence: 'Appointment as QA manager; competence record.',
        })
      }
    }
  }
}
