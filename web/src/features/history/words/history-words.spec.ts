import { describe, expect, it } from 'vitest'
import { actionWord } from './action-words'
import { fieldsOf, fieldWord, isEmptyValue } from './field-words'
import { thingPath, thingWord } from './thing-words'
import { valueWord } from './value-words'

// entries: constructed
const names = {
  people: new Map([['7', 'Tomas Lindqvist']]),
  clients: new Map([['3', 'Pellam Hills Water Board']]),
  methods: new Map([['1', 'Iron by 1,10-phenanthroline']]),
  limits: new Map([['5', 'Secondary level, 0.3 mg/L']]),
}
const say = (thing: string, field: string, value: unknown) =>
  valueWord({ thing, field, value, names, at: (instant) => `at ${instant}` })

describe('the history in words', () => {
  it('names things, fields and acts, also those it was never told of', () => {
    expect(thingWord('position_readings')).toBe('Reading')
    expect(thingWord('storage_checks')).toBe('Storage checks')
    expect(fieldWord('temperature_c')).toBe('Temperature, °C')
    expect(fieldWord('acceptance_reason')).toBe('Acceptance reason')
    expect(actionWord('sample.qualify')).toBe('Accepted a sample with a qualification')
    expect(actionWord('batch.read-again')).toBe('Batch: read again')
    expect(actionWord('migration')).toBe('Migration')
  })
  it('reads states, people, clients, methods and times', () => {
    expect(say('samples', 'state', 'in-analysis')).toBe('in analysis')
    expect(say('users', 'state', 'on-leave')).toBe('on leave')
    expect(say('samples', 'received_by', 7)).toBe('Tomas Lindqvist')
    expect(say('samples', 'received_by', 99)).toBe('person 99')
    expect(say('samples', 'client_id', 3)).toBe('Pellam Hills Water Board')
    expect(say('determinations', 'method_id', '1')).toBe('Iron by 1,10-phenanthroline')
    expect(say('alerts', 'limit_id', 5)).toBe('Secondary level, 0.3 mg/L')
    expect(say('samples', 'collected_at', '2026-11-30T13:15:00+00:00')).toBe('at 2026-11-30T13:15:00+00:00')
    expect(say('users', 'password_hash', '(hidden)')).toBe('not shown')
    expect(say('limits', 'unit', 'ug/L')).toBe('µg/L')
    expect(say('contacts', 'gets_alerts', false)).toBe('no')
  })
  it('keeps a zero and shows nothing as nothing', () => {
    expect(say('batches', 'above_limit', 0)).toBe('0')
    expect(say('samples', 'remarks', '')).toBeNull()
    expect(isEmptyValue(0)).toBe(false)
    expect(isEmptyValue([])).toBe(true)
  })
  it('leaves counters out and puts the number first', () => {
    expect(fieldsOf({ old: null, new: { id: 1, version: 2, number: 'S-26-04117' } })).toEqual([
      'number',
      'id',
    ])
  })
  it('leads to the thing, or to what it belongs to', () => {
    const entry = { thingId: '12', old: null, new: null }
    expect(thingPath({ ...entry, thing: 'samples' })).toBe('/receiving/samples/12')
    expect(thingPath({ ...entry, thing: 'position_readings', new: { batch_id: 9 } })).toBe('/batches/9')
    expect(thingPath({ ...entry, thing: 'signatures', new: { thing: 'calibrations', thing_id: 4 } })).toBe(
      '/calibrations/4',
    )
    // an update names only what changed
    expect(thingPath({ ...entry, thing: 'determinations', new: { state: 'in-batch' } })).toBeNull()
  })
})
