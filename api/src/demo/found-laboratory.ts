import { expectedSlope } from '@weirlight/shared/assay'
import type { Role } from '@weirlight/shared/permissions'
import { ClientsService, ContactsService } from '../modules/clients/index.js'
import { InstrumentsService } from '../modules/instruments/index.js'
import { LaboratoryService } from '../modules/laboratory/index.js'
import { MaterialsService } from '../modules/materials/index.js'
import { MethodsService } from '../modules/methods/index.js'
import { ProgrammesService } from '../modules/programmes/index.js'
import { FirstAdministratorService, InvitationsService, UsersService } from '../modules/users/index.js'
import { Database, SYSTEM } from '../platform/index.js'
import type { DemoMethod, DemoWorld } from './demo-world.js'
import { newPassphrase } from './passphrase.js'

const PLANS = [
  {
    code: 'fe-phenanthroline',
    analyte: 'Fe',
    cellPathCm: '1',
    standards: ['0', '0.05', '0.1', '0.5', '1', '2', '4'],
    instrument: 1,
    reagents: ['1,10-phenanthroline solution', 'Acetate buffer', 'Hydroxylamine solution'],
  },
  {
    code: 'cu-bathocuproine',
    analyte: 'Cu',
    cellPathCm: '1',
    standards: ['0', '0.05', '0.1', '0.5', '1', '2', '4'],
    instrument: 1,
    reagents: ['Bathocuproine disulfonate solution', 'Citrate buffer', 'Hydroxylamine solution'],
  },
  {
    code: 'mn-persulfate',
    analyte: 'Mn',
    cellPathCm: '5',
    standards: ['0', '0.025', '0.05', '0.1', '0.5', '1', '2'],
    instrument: 0,
    reagents: ['Silver and mercury reagent', 'Ammonium persulfate'],
  },
  {
    code: 'cr6-diphenylcarbazide',
    analyte: 'Cr',
    cellPathCm: '1',
    standards: ['0', '0.01', '0.02', '0.1', '0.25', '0.5', '1'],
    instrument: 0,
    reagents: ['1,5-diphenylcarbazide in acetone', 'Sulfuric acid, 1 + 9'],
  },
] as const

const NAMES = { Fe: 'Iron', Cu: 'Copper', Mn: 'Manganese', Cr: 'Chromium(VI)' } as const

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
  const [administrator] = world.ofRole('administrator')
  if (!administrator) throw new Error('Nobody can invite.')
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
  const [manager] = world.ofRole('qa-manager')
  if (!manager) throw new Error('The demonstration needs a QA manager.')
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
  const [technician] = world.ofRole('technician')
  if (!technician) throw new Error('The demonstration needs a technician.')
  const service = world.service(InstrumentsService)
  const ids: string[] = []
  for (const instrument of world.data.instruments) {
    const { id } = await service.add(technician, instrument)
    ids.push(id)
    const nextDueOn = days.expires
    await service.recordCheck(technician, id, {
      kind: 'wavelength',
      reference: 'Holmium oxide solution, 536.5 nm band',
      nominal: '536.5',
      found: (536.5 + world.chance.normal(0.15)).toFixed(1),
      tolerance: '1.0',
      unit: 'nm',
      nextDueOn,
      note: '',
    })
    await service.recordCheck(technician, id, {
      kind: 'photometric',
      reference: 'Neutral filter set 4',
      nominal: '0.500',
      found: (0.5 + world.chance.normal(0.001)).toFixed(3),
      tolerance: '0.005',
      unit: 'A',
      nextDueOn,
      note: '',
    })
    await service.recordCheck(technician, id, {
      kind: 'baseline',
      reference: 'Water against water, ten minutes',
      nominal: '0.000',
      found: world.chance.normal(0.0004).toFixed(4),
      tolerance: '0.002',
      unit: 'A',
      nextDueOn,
      note: '',
    })
  }
  return ids
}

async function stockTheShelves(
  world: DemoWorld,
  days: { founded: string; expires: string; instruments: string[] },
): Promise<void> {
  const [technician] = world.ofRole('technician')
  if (!technician) throw new Error('The demonstration needs a technician.')
  const lots = world.service(MaterialsService)
  const methods = (await world.service(MethodsService).list()).items
  const received = {
    receivedOn: days.founded,
    openedOn: days.founded,
    expiresOn: days.expires,
    storage: 'Cabinet 2, 20 °C',
  }
  for (const plan of PLANS) {
    const row = methods.find((one) => one.code === plan.code)
    const instrumentId = days.instruments[plan.instrument]
    if (!row || !instrumentId) throw new Error(`There is no method ${plan.code}.`)
    const { definition } = await world.service(MethodsService).get(world.service(Database).read, row.id)
    const name = NAMES[plan.analyte]
    const hazards =
      plan.analyte === 'Cr'
        ? 'Hexavalent chromium: carcinogenic. Gloves, no skin contact, chromium waste.'
        : 'Acidic. Gloves and eye protection.'
    const standard = (given: {
      kind: 'stock' | 'working-standard' | 'second-source' | 'control'
      label: string
      concentration: string
      uncertainty: string
      lotCode: string
      producer: string
      parentId: string | null
      recipe: string
    }) =>
      lots.add(technician, {
        ...received,
        kind: given.kind,
        name: given.label,
        analyte: plan.analyte,
        concentration: given.concentration,
        uncertainty: given.uncertainty,
        lotCode: given.lotCode,
        producer: given.producer,
        certificateRef: given.parentId ? '' : `MF-CRM-${given.lotCode}`,
        parentId: given.parentId,
        recipe: given.recipe,
        hazards,
      })
    const stock = await standard({
      kind: 'stock',
      label: `${name} stock standard`,
      concentration: '1000',
      uncertainty: '3',
      lotCode: `${plan.analyte}-118`,
      producer: 'Northmere Reference Materials (invented)',
      parentId: null,
      recipe: '',
    })
    const working = await standard({
      kind: 'working-standard',
      label: `${name} working standard`,
      concentration: '100',
      uncertainty: '0.5',
      lotCode: `${plan.analyte}-118-1`,
      producer: world.data.laboratory.name,
      parentId: stock.id,
      recipe: '10.00 mL of the stock to 100 mL in 1 % nitric acid, class A pipette P-04 and flask F-11.',
    })
    const second = await standard({
      kind: 'second-source',
      label: `${name} second source`,
      concentration: '1000',
      uncertainty: '4',
      lotCode: `${plan.analyte}-702`,
      producer: 'Calder Standards Works (invented)',
      parentId: null,
      recipe: '',
    })
    const control = await standard({
      kind: 'control',
      label: `${name} control material`,
      concentration: '100',
      uncertainty: '0.8',
      lotCode: `${plan.analyte}-C31`,
      producer: 'Calder Standards Works (invented)',
      parentId: second.id,
      recipe: '10.00 mL of the second source to 100 mL.',
    })
    const reagentIds: string[] = []
    for (const reagent of plan.reagents) {
      const lot = await lots.add(technician, {
        ...received,
        kind: 'reagent',
        name: reagent,
        analyte: null,
        concentration: null,
        uncertainty: null,
        lotCode: `MF-${world.chance.whole(100, 999)}`,
        producer: world.data.laboratory.name,
        certificateRef: '',
        parentId: null,
        recipe: 'As the method says; water from the still, conductivity below 1 µS/cm.',
        hazards: definition.cautions[0]?.text ?? '',
      })
      reagentIds.push(lot.id)
    }
    const whole = definition as DemoMethod['definition']
    const slope = expectedSlope({
      molarAbsorptivity: whole.molarAbsorptivity.value,
      molarMass: whole.molarMass,
      pathLengthCm: Number(plan.cellPathCm),
    })
    world.methods.push({
      id: row.id,
      analyte: plan.analyte,
      title: row.title,
      definition: whole,
      cellPathCm: plan.cellPathCm,
      standards: plan.standards,
      instrumentId,
      stockId: stock.id,
      workingId: working.id,
      secondSourceId: second.id,
      controlId: control.id,
      reagentIds,
      slope: slope * 0.985,
    })
  }
}

async function authorise(world: DemoWorld, days: { founded: string; expires: string }): Promise<void> {
  const [administrator] = world.ofRole('administrator')
  if (!administrator) throw new Error('Nobody can authorise.')
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
