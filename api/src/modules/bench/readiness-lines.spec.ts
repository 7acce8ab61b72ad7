import { describe, expect, it } from 'vitest'
import type { InstrumentRow } from '../instruments/index.js'
import type { MaterialRow } from '../materials/index.js'
import { readinessLines, type MethodFacts } from './readiness-lines.js'

// constructed
const instrument = (changes: Partial<InstrumentRow>): InstrumentRow => ({
  id: '1',
  number: 'I-26-01',
  name: 'Spectro',
  kind: 'double beam',
  serial: '',
  location: '',
  bandwidthNm: '2',
  state: 'in-use',
  nextCheckDueOn: '2026-12-20',
  hasFailedCheck: false,
  usable: true,
  version: 1,
  ...changes,
})
const lot = (changes: Partial<MaterialRow>): MaterialRow => ({
  id: '1',
  number: 'R-26-0001',
  kind: 'reagent',
  name: 'Phenanthroline',
  analyte: 'Fe',
  concentration: null,
  uncertainty: null,
  lotCode: '',
  producer: '',
  receivedOn: '2026-01-01',
  openedOn: null,
  expiresOn: '2027-01-01',
  parentId: null,
  parentNumber: null,
  state: 'in-use',
  usable: true,
  version: 1,
  ...changes,
})
const calibration = (id: string, instrumentId: string) => ({
  id,
  number: `K-26-000${id}`,
  methodId: '1',
  instrumentId,
  cellPathCm: '1',
  validUntil: new Date('2026-12-14T09:00:00Z'),
})
const facts: MethodFacts = {
  analyte: 'Fe',
  today: '2026-12-01',
  calibrations: [calibration('1', '1')],
  instruments: [instrument({})],
  materials: [lot({}), lot({ id: '2', number: 'W-26-0001', kind: 'control', name: 'Control' })],
  people: [{ userId: '1', name: 'Ines', methodId: '1', validUntil: '2027-05-01' }],
}
const linesOf = (what: string, changes: Partial<MethodFacts>) =>
  readinessLines({ ...facts, ...changes }).filter((line) => line.what === what)

describe('readinessLines', () => {
  it('has nothing against a method that is ready', () => {
    expect(readinessLines(facts).filter(({ ready }) => !ready)).toEqual([])
  })

  it('takes the calibration whose instrument may be used before one that is valid for longer', () => {
    const instruments = [
      instrument({ usable: false, state: 'out-of-use' }),
      instrument({ id: '2', number: 'I-26-02' }),
    ]
    const calibrations = [calibration('1', '1'), calibration('2', '2')]
    expect(linesOf('Calibration', { instruments, calibrations })[0]?.to).toBe('/calibrations/2')
    expect(linesOf('Instrument', { instruments, calibrations })[0]?.to).toBe('/bench/instruments/2')
  })

  it.each([
    [{ state: 'out-of-use' as const }, 'out of use'],
    [{ nextCheckDueOn: null }, 'no check on record'],
    [{ hasFailedCheck: true }, 'failed its last check'],
    [{ nextCheckDueOn: '2026-11-30' }, 'due for a check on 2026-11-30'],
  ])('says why an instrument %o may not be used', (changes, why) => {
    const [line] = linesOf('Instrument', { instruments: [instrument({ ...changes, usable: false })] })
    expect(line).toMatchObject({ ready: false })
    expect(line?.why).toContain(why)
  })

  it('asks for a reagent that ran out lately and was not replaced, and lets one rest that was given up', () => {
    const [control] = facts.materials.filter(({ kind }) => kind === 'control')
    const expired = lot({ id: '9', name: 'Buffer', expiresOn: '2026-11-20', usable: false })
    const materials = [lot({}), expired, ...(control ? [control] : [])]
    expect(linesOf('Reagents', { materials }).map(({ ready }) => ready)).toEqual([false, true])
    const replaced = [...materials, lot({ id: '10', name: ' buffer' })]
    expect(linesOf('Reagents', { materials: replaced }).map(({ ready }) => ready)).toEqual([true])
    const givenUp = [lot({}), { ...expired, expiresOn: '2026-09-01' }]
    expect(linesOf('Reagents', { materials: givenUp }).map(({ ready }) => ready)).toEqual([true])
  })

  it('names three reagents and counts more, with the one that runs out first', () => {
    // constructed
    const days = ['2027-03-01', '2027-01-15', '2027-02-01', '2027-04-01']
    const lots = days.map((expiresOn, index) =>
      lot({ id: `2${index}`, number: `R-26-002${index}`, name: `Buffer ${index}`, expiresOn }),
    )
    const why = (materials: typeof lots) => linesOf('Reagents', { materials })[0]?.why
    expect(why(lots.slice(0, 3))).toBe(
      'In date: R-26-0020, Buffer 0; R-26-0021, Buffer 1; R-26-0022, Buffer 2.',
    )
    expect(why(lots)).toBe('All 4 in date. First to run out: R-26-0021, Buffer 1.')
  })

  it('leaves out another metal’s lots', () => {
    const materials = facts.materials.map((one) => ({ ...one, analyte: 'Cu' as const }))
    expect(linesOf('Reagents', { materials })[0]?.ready).toBe(false)
    expect(linesOf('Verification standard', { materials })[0]?.ready).toBe(false)
  })

  it('names three analysts and counts the others', () => {
    const people = ['Ann', 'Ben', 'Cleo', 'Dee', 'Eva'].map((name) => ({
      userId: name,
      name,
      methodId: '1',
      validUntil: '2027-05-01',
    }))
    expect(linesOf('Authorised analyst', { people })[0]?.why).toBe('Ann, Ben, Cleo and 2 more.')
    expect(linesOf('Authorised analyst', { people: [] })[0]?.ready).toBe(false)
  })
})
