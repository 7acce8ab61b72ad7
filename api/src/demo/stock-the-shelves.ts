import { expectedSlope } from '@weirlight/shared/assay'
import { MaterialsService } from '../modules/materials/index.js'
import { MethodsService } from '../modules/methods/index.js'
import { Database } from '../platform/index.js'
import type { DemoMethod, DemoWorld } from './demo-world.js'

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

type Plan = (typeof PLANS)[number]
type Lot = Parameters<MaterialsService['add']>[1]
type Received = Pick<Lot, 'receivedOn' | 'openedOn' | 'expiresOn' | 'storage'>

/** The first lots: for each method its standards and reagents, and what the demonstration knows of the method from then on. */
export async function stockTheShelves(
  world: DemoWorld,
  days: { founded: string; expires: string; instruments: string[] },
): Promise<void> {
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
    const standardIds = await addStandards(world, plan, received)
    const reagentIds = await addReagents(world, plan, {
      ...received,
      hazards: definition.cautions[0]?.text ?? '',
    })
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
      ...standardIds,
      reagentIds,
      slope: slope * 0.985,
    })
  }
}

async function addStandards(
  world: DemoWorld,
  { analyte }: Plan,
  received: Received,
): Promise<Pick<DemoMethod, 'stockId' | 'workingId' | 'secondSourceId' | 'controlId'>> {
  const technician = world.first('technician')
  const name = NAMES[analyte]
  const hazards =
    analyte === 'Cr'
      ? 'Hexavalent chromium: carcinogenic. Gloves, no skin contact, chromium waste.'
      : 'Acidic. Gloves and eye protection.'
  const add = (lot: Omit<Lot, keyof Received | 'analyte' | 'certificateRef' | 'hazards'>) =>
    world.service(MaterialsService).add(technician, {
      ...received,
      ...lot,
      analyte,
      certificateRef: lot.parentId ? '' : `MF-CRM-${lot.lotCode}`,
      hazards,
    })
  const stock = await add({
    kind: 'stock',
    name: `${name} stock standard`,
    concentration: '1000',
    uncertainty: '3',
    lotCode: `${analyte}-118`,
    producer: 'Northmere Reference Materials (invented)',
    parentId: null,
    recipe: '',
  })
  const working = await add({
    kind: 'working-standard',
    name: `${name} working standard`,
    concentration: '100',
    uncertainty: '0.5',
    lotCode: `${analyte}-118-1`,
    producer: world.data.laboratory.name,
    parentId: stock.id,
    recipe: '10.00 mL of the stock to 100 mL in 1 % nitric acid, class A pipette P-04 and flask F-11.',
  })
  const second = await add({
    kind: 'second-source',
    name: `${name} second source`,
    concentration: '1000',
    uncertainty: '4',
    lotCode: `${analyte}-702`,
    producer: 'Calder Standards Works (invented)',
    parentId: null,
    recipe: '',
  })
  const control = await add({
    kind: 'control',
    name: `${name} control material`,
    concentration: '100',
    uncertainty: '0.8',
    lotCode: `${analyte}-C31`,
    producer: 'Calder Standards Works (invented)',
    parentId: second.id,
    recipe: '10.00 mL of the second source to 100 mL.',
  })
  return { stockId: stock.id, workingId: working.id, secondSourceId: second.id, controlId: control.id }
}

async function addReagents(
  world: DemoWorld,
  { reagents }: Plan,
  given: Received & { hazards: string },
): Promise<string[]> {
  const technician = world.first('technician')
  const ids: string[] = []
  for (const name of reagents) {
    const lot = await world.service(MaterialsService).add(technician, {
      ...given,
      kind: 'reagent',
      name,
      analyte: null,
      concentration: null,
      uncertainty: null,
      lotCode: `MF-${world.chance.whole(100, 999)}`,
      producer: world.data.laboratory.name,
      certificateRef: '',
      parentId: null,
      recipe: 'As the method says; water from the still, conductivity below 1 µS/cm.',
    })
    ids.push(lot.id)
  }
  return ids
}
