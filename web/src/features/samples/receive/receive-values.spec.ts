import { receiveSample } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { contractProblems } from '../../../lib/contract-problems'
import { bodyOf, emptyForm, nextOfRound, type ReceiveValues } from './receive-values'

// constructed
const FIRST = '0b8f6e0c-6a1d-4f0e-8f38-5a3b1e9f0a01'
const SECOND = '0b8f6e0c-6a1d-4f0e-8f38-5a3b1e9f0a02'
const full: ReceiveValues = {
  draftId: FIRST,
  clientId: '3',
  pointId: '12',
  purpose: 'operational',
  kind: 'routine',
  collectedAt: '2026-11-30T08:15:00-05:00',
  collectedBy: 'R. Sampler',
  receivedAt: '2026-11-30T11:40:00-05:00',
  preservation: 'nitric-acid',
  ph: '1.6',
  temperatureC: '4.8',
  container: 'plastic',
  filteredInField: true,
  condition: 'clear',
  remarks: 'tap run 5 min',
  determinations: [{ methodId: '1' }, { methodId: '3' }],
}
const paths = (values: ReceiveValues) =>
  receiveSample.body ? contractProblems(receiveSample.body, bodyOf(values)).map(({ path }) => path) : []

describe('the receiving form', () => {
  it('sends a full form as it stands', () => {
    expect(paths(full)).toEqual([])
    expect(bodyOf(full)).toEqual(full)
  })
  it('has every missing entry named on its field', () => {
    expect(new Set(paths(emptyForm(FIRST)))).toEqual(
      new Set([
        'clientId',
        'pointId',
        'purpose',
        'collectedAt',
        'collectedBy',
        'receivedAt',
        'preservation',
        'container',
        'determinations',
      ]),
    )
  })
  it('takes a blank for nothing measured', () => {
    expect(paths({ ...full, ph: ' ', temperatureC: '' })).toEqual([])
  })
  it('names a decimal comma, and times in the wrong order', () => {
    expect(paths({ ...full, ph: '1,6' })).toEqual(['ph'])
    expect(paths({ ...full, receivedAt: '2026-11-30T07:00:00-05:00' })).toEqual(['receivedAt'])
  })
  it('keeps the round for the next bottle and asks for the bottle again', () => {
    const next = nextOfRound(full, SECOND)
    expect(next).toMatchObject({
      draftId: SECOND,
      clientId: '3',
      purpose: 'operational',
      collectedBy: 'R. Sampler',
      preservation: 'nitric-acid',
      container: 'plastic',
      filteredInField: true,
      determinations: full.determinations,
    })
    for (const asked of ['pointId', 'collectedAt', 'ph', 'temperatureC', 'condition', 'remarks'] as const) {
      expect(next[asked], asked).toBeUndefined()
    }
  })
})
