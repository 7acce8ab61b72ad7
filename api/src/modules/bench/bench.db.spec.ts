import {
  addMaterial,
  getMaterial,
  getMethod,
  getReadiness,
  listMaterials,
  listMethods,
  listProgrammes,
  finishMaterial,
  withdrawMaterial,
} from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import { beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { Agent } from '../../testing/agent.js'
import { anAnalyst, anInstrument, daysFromToday } from '../../testing/builders/bench.builders.js'
import { methodId, theReference } from '../../testing/builders/reference.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { InstrumentsModule } from '../instruments/index.js'
import { MaterialsModule, MaterialsService } from '../materials/index.js'
import { MethodsModule } from '../methods/index.js'
import { ProgrammesModule } from '../programmes/index.js'
import { BenchModule } from './bench.module.js'

const at = useTestApp({
  imports: [BenchModule, InstrumentsModule, MaterialsModule, MethodsModule, ProgrammesModule],
})
let agent: Agent
let technician: Awaited<ReturnType<typeof aUser>>
const reason = 'for this test'
const day = (days: number) => daysFromToday(at().database, days)

const stock = {
  kind: 'stock' as const,
  name: 'Iron standard',
  analyte: 'Fe' as const,
  concentration: '1000',
  uncertainty: '4',
  lotCode: 'HC1',
  producer: 'Example Standards',
  certificateRef: 'C-1',
  openedOn: null,
  parentId: null,
  recipe: '',
  storage: 'room',
  hazards: 'acid',
}

async function aLotOfOurs(changes: Record<string, unknown> = {}) {
  const body = { ...stock, receivedOn: day(-100), expiresOn: day(100), ...changes }
  return agent.call(addMaterial, { body })
}

beforeAll(async () => {
  await theReference(at().database)
})
beforeEach(async () => {
  technician = await aUser(at().database.db, { name: 'Tess Tech' })
  agent = await at().as(technician)
})

describe('the catalogue', () => {
  it('answers with every method and programme, each limit with its source', async () => {
    const methods = (await agent.call(listMethods, {})).items
    expect(methods.length).toBeGreaterThanOrEqual(7)
    const iron = methods.find(({ code }) => code === 'fe-phenanthroline')
    const view = await agent.call(getMethod, { params: { id: iron?.id ?? '' } })
    // IUPAC 2021, as the catalogue has it
    expect(view).toMatchObject({ wavelengthNm: 510, molarMass: 55.845 })
    expect(view.definition['holdTime']).toMatchObject({ code: 'metals-in-acid' })
    const { items } = await agent.call(listProgrammes, {})
    const us = items.find(({ code }) => code === 'us-drinking-water')
    // 40 CFR 143.3: secondary level for iron 0.3 mg/L
    expect(us?.limits.find(({ analyte }) => analyte === 'Fe')).toMatchObject({
      value: '0.3',
      unit: 'mg/L',
      kind: 'secondary',
    })
    expect(
      items.flatMap(({ limits }) => limits).every(({ source, edition }) => source !== '' && edition !== ''),
    ).toBe(true)
  })
})

describe('a lot', () => {
  it('has a number of its kind, and is usable to its last day', async () => {
    const reagent = await aLotOfOurs({ kind: 'reagent', analyte: null, concentration: null, name: 'Buffer' })
    const lot = await aLotOfOurs({ expiresOn: day(0) })
    expect(reagent.number).toMatch(/^R-\d\d-\d{4}$/)
    expect(lot.number).toMatch(/^W-\d\d-\d{4}$/)
    expect(lot).toMatchObject({ usable: true, preparedBy: { id: technician.userId, name: 'Tess Tech' } })
    const expired = await aLotOfOurs({ expiresOn: day(-2) })
    expect(expired.usable).toBe(false)
    const usable = (await agent.call(listMaterials, { query: { usable: 'yes' } })).items.map(({ id }) => id)
    expect(usable).toContain(lot.id)
    expect(usable).not.toContain(expired.id)
    const [problem] = await at()
      .get(MaterialsService)
      .findUnusable(at().database.db.read, [lot.id, expired.id])
    expect(problem).toEqual({
      id: expired.id,
      why: `${expired.number}, Iron standard, expired on ${expired.expiresOn}.`,
    })
  })

  it('knows its line back to the stock that was bought, and what was made from it', async () => {
    const bought = await aLotOfOurs()
    const made = { kind: 'working-standard', recipe: '10.00 mL in a 100 mL flask' }
    const hundred = await aLotOfOurs({ ...made, concentration: '100', parentId: bought.id })
    const ten = await aLotOfOurs({ ...made, concentration: '10', parentId: hundred.id })
    expect(ten.ancestry.map(({ number }) => number)).toEqual([hundred.number, bought.number])
    expect(ten.parentNumber).toBe(hundred.number)
    const { usedIn } = await agent.call(getMaterial, { params: { id: hundred.id } })
    expect(usedIn).toEqual([{ kind: 'lot', id: ten.id, number: ten.number }])
  })

  it('is not made from what is expired, withdrawn, of another metal, weaker, or shorter-lived', async () => {
    const made = {
      kind: 'working-standard',
      recipe: 'as usual',
      concentration: '10',
      receivedOn: day(-1),
      expiresOn: day(50),
    }
    const old = await aLotOfOurs({ expiresOn: day(-2) })
    const weak = await aLotOfOurs({ concentration: '5', expiresOn: day(20) })
    const copper = await aLotOfOurs({ analyte: 'Cu' })
    const refusedFor = async (parentId: string) => {
      const problem = await agent.refused(addMaterial, {
        body: { ...stock, ...made, kind: 'working-standard' as const, parentId },
      })
      return problem.errors?.map(({ path }) => path).sort()
    }
    expect(await refusedFor(old.id)).toEqual(['expiresOn', 'parentId'])
    expect(await refusedFor(weak.id)).toEqual(['concentration', 'expiresOn'])
    expect(await refusedFor(copper.id)).toEqual(['parentId'])
    expect(await refusedFor('999999')).toEqual(['parentId'])
    const fields = {
      ...stock,
      kind: 'working-standard' as const,
      receivedOn: day(0),
      expiresOn: day(-1),
      concentration: '1,5',
    }
    const problem = await agent.refused(addMaterial, { body: fields })
    expect(problem.errors?.map(({ path }) => path)).toContain('concentration')
  })

  it('is used up once, then offered no more; it can still be withdrawn', async () => {
    const lot = await aLotOfOurs()
    const params = { id: lot.id }
    expect((await agent.refused(finishMaterial, { params, body: { version: lot.version + 1 } })).code).toBe(
      'stale',
    )
    const used = await agent.call(finishMaterial, { params, body: { version: lot.version } })
    expect(used).toMatchObject({ state: 'used-up', usable: false })
    const again = await agent.refused(finishMaterial, { params, body: { version: used.version } })
    expect(again.code).toBe('not-allowed-now')
    const auditor = await at().as(await aUser(at().database.db, { role: 'auditor' }))
    const barred = await auditor.refused(finishMaterial, { params, body: { version: used.version } })
    expect(barred.code).toBe('forbidden')
    const withdrawn = await agent.call(withdrawMaterial, { params, body: { version: used.version, reason } })
    expect(withdrawn.state).toBe('withdrawn')
    const late = await agent.refused(finishMaterial, { params, body: { version: withdrawn.version } })
    expect(late.code).toBe('not-allowed-now')
  })

  it('is withdrawn once, with a reason, also when two do it at once', async () => {
    const lot = await aLotOfOurs()
    const other = await at().as(await aUser(at().database.db, { role: 'qa-manager' }))
    const body = { version: lot.version, reason }
    const sent = await Promise.all(
      [agent, other].map((one) => one.send(withdrawMaterial, { params: { id: lot.id }, body })),
    )
    oneWins(sent)
    const now = await agent.call(getMaterial, { params: { id: lot.id } })
    expect(now).toMatchObject({ state: 'withdrawn', usable: false })
    const again = await agent.refused(withdrawMaterial, {
      params: { id: lot.id },
      body: { version: now.version, reason },
    })
    expect(again.code).toBe('not-allowed-now')
    const auditor = await at().as(await aUser(at().database.db, { role: 'auditor' }))
    expect((await auditor.refused(withdrawMaterial, { params: { id: lot.id }, body })).code).toBe('forbidden')
  })
})

describe('readiness', () => {
  const iron = async () => {
    const id = await methodId(at().database, 'mn-persulfate')
    const { methods } = await agent.call(getReadiness, {})
    const found = methods.find(({ methodId: of }) => of === id)
    if (!found) throw new Error('no such method')
    return found
  }

  it('says line by line what is missing, and nothing once it is there', async () => {
    const { database } = at()
    const nothing = await iron()
    expect(nothing.ready).toBe(false)
    const missing = nothing.lines.filter(({ ready }) => !ready).map(({ what }) => what)
    expect(missing).toEqual(
      expect.arrayContaining(['Calibration', 'Verification standard', 'Authorised analyst']),
    )

    const manganese = { analyte: 'Mn', name: 'Manganese' }
    await aLotOfOurs({ ...manganese, kind: 'reagent', concentration: null, name: 'Persulfate' })
    const control = await aLotOfOurs({ ...manganese, kind: 'second-source' })
    const analyst = await anAnalyst(database, { methodCode: 'mn-persulfate', name: 'Anna Analyst' })
    const instrument = await anInstrument(database)
    const id = await methodId(database, 'mn-persulfate')
    await database.db.transaction(analyst, 'calibration.sign', null, (trx) =>
      sql`insert into calibrations (number, method_id, instrument_id, cell_path_cm, model, weighting, state, prepared_by, valid_until)
        values ('K-T-1', ${id}, ${instrument.id}, '5', 'linear', 'none', 'in-force', ${analyst.userId}, now() + interval '9 days')`.execute(
        trx,
      ),
    )
    const ready = await iron()
    expect(ready.lines.filter((line) => !line.ready)).toEqual([])
    expect(ready.ready).toBe(true)
    const line = (what: string) => ready.lines.find((one) => one.what === what)
    expect(line('Calibration')).toMatchObject({ why: 'K-T-1 is in force for the 5 cm cell.' })
    expect(line('Calibration')?.to).toMatch(/^\/calibrations\/\d+$/)
    expect(line('Instrument')?.to).toBe(`/bench/instruments/${instrument.id}`)
    expect(line('Verification standard')?.to).toBe(`/bench/materials/${control.id}`)
    expect(line('Authorised analyst')).toMatchObject({ why: 'Anna Analyst.', to: '/bench/people' })

    await agent.call(withdrawMaterial, {
      params: { id: control.id },
      body: { version: control.version, reason },
    })
    const after = await iron()
    expect(after.ready).toBe(false)
    expect(after.lines.find(({ what }) => what === 'Verification standard')?.why).toBe(
      `${control.number}, Manganese, is withdrawn.`,
    )
  })
})
