import { describe, expect, it } from 'vitest'
import type { InstrumentRow, MaterialRow } from '../api/calibration-queries'
import { instrumentChoices, lotChoices, whyNotLot } from './lots'

// constructed throughout
const TODAY = '2026-12-01'
const aLot = (part: Partial<MaterialRow>): MaterialRow => ({
  id: '1',
  number: 'W-26-0001',
  kind: 'stock',
  name: 'Iron standard',
  analyte: 'Fe',
  concentration: '1000',
  uncertainty: '3',
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
  ...part,
})

describe('lots to choose from', () => {
  it.each([
    [{}, null],
    [{ expiresOn: '2026-11-30' }, 'expired 2026-11-30'],
    [{ expiresOn: TODAY }, null],
    [{ state: 'withdrawn' }, 'withdrawn'],
    [{ state: 'used-up' }, 'used up'],
    [{ usable: false }, 'not usable: see the lot'],
  ] as const)('%o: %s', (part, why) => {
    expect(whyNotLot(aLot(part), TODAY)).toBe(why)
  })

  it('are of the right kind and metal, usable ones first, the one running out first at the head', () => {
    const lots = [
      aLot({ id: '1', expiresOn: '2026-10-01' }),
      aLot({ id: '2', expiresOn: '2027-06-01' }),
      aLot({ id: '3', expiresOn: '2027-02-01' }),
      aLot({ id: '4', analyte: 'Cu' }),
      aLot({ id: '5', kind: 'reagent', analyte: null }),
    ]
    const found = lotChoices({ lots, kinds: ['stock'], analyte: 'Fe', today: TODAY })
    expect(found.map((choice) => choice.value)).toEqual(['3', '2', '1'])
    expect(found[0]?.label).toBe('W-26-0001 · Iron standard, 1000 ± 3 mg/L, to 2027-02-01')
  })
})

describe('instruments to choose from', () => {
  const anInstrument = (part: Partial<InstrumentRow>): InstrumentRow => ({
    id: '1',
    number: 'I-26-01',
    name: 'Spectrophotometer 1',
    kind: '',
    serial: '',
    location: 'Room 3',
    state: 'in-use',
    nextCheckDueOn: '2026-12-20',
    usable: true,
    version: 1,
    ...part,
  })
  it.each([
    [{}, null],
    [{ state: 'out-of-use', usable: false }, 'out of use'],
    [{ nextCheckDueOn: '2026-11-30', usable: false }, 'its check was due 2026-11-30'],
    [{ nextCheckDueOn: null, usable: false }, 'never checked'],
  ] as const)('%o: %s', (part, why) => {
    expect(instrumentChoices([anInstrument(part)], TODAY)[0]?.why).toBe(why)
  })
})
