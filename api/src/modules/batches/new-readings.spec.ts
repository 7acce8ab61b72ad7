import { describe, expect, it } from 'vitest'
import type { PositionReadingRow, PositionRow } from './batch-rows.js'
import { cellKey, planReadings, type Entry } from './new-readings.js'

// Constructed.
const position = (id: string) => ({ id, position: Number(id) }) as PositionRow
const reading = (changes: Partial<PositionReadingRow>): PositionReadingRow => ({
  id: '100',
  positionId: '1',
  replicate: 1,
  absorbanceText: '0.50',
  readAt: new Date('2026-12-01T10:00:00Z'),
  readBy: 'me',
  readByName: 'Me Myself',
  source: 'typed',
  supersedesId: null,
  reason: '',
  ...changes,
})
const plan = (entries: Entry[], current: PositionReadingRow[] = [], isFile = false) =>
  planReadings({
    entries,
    positions: [position('1'), position('2')],
    current: new Map(current.map((one) => [cellKey(one.positionId, one.replicate), one])),
    replicates: 2,
    actorId: 'me',
    isFile,
  })
const entry = (changes: Partial<Entry> = {}): Entry => ({
  positionId: '1',
  replicate: 1,
  absorbance: '0.51',
  supersedes: null,
  ...changes,
})
const refusal = (act: () => unknown) => {
  try {
    act()
  } catch (error) {
    return error as {
      code: string
      detail: string
      errors: { path: string; message: string }[]
      conflict?: unknown
    }
  }
  throw new Error('Nothing was refused.')
}

describe('entries into a run sheet', () => {
  it('a first reading needs no reason; a correction does, and supersedes what was seen', () => {
    expect(plan([entry()])).toEqual([
      { positionId: '1', replicate: 1, absorbance: '0.51', supersedesId: null, reason: '' },
    ])
    const bare = refusal(() => plan([entry({ supersedes: '100' })], [reading({})]))
    expect(bare.errors).toEqual([
      { path: 'readings.0.reason', message: 'Say in a few words why the reading is corrected.' },
    ])
    expect(plan([entry({ supersedes: '100', reason: 'Bubble' })], [reading({})])).toEqual([
      { positionId: '1', replicate: 1, absorbance: '0.51', supersedesId: '100', reason: 'Bubble' },
    ])
  })
  it('what somebody else entered unseen is named, with whose it is', () => {
    const other = reading({ readBy: 'other', readByName: 'Tomas Quell', absorbanceText: '0.3964' })
    const stale = refusal(() => plan([entry({ positionId: '2' }), entry()], [other]))
    expect(stale.code).toBe('stale')
    expect(stale.errors).toEqual([
      { path: 'readings.1', message: 'Position 1, reading 1: Tomas Quell entered 0.3964 there meanwhile.' },
    ])
    expect(stale.conflict).toEqual({ changedBy: 'Tomas Quell', changedAt: '2026-12-01T10:00:00.000Z' })
  })
  it('an entry whose answer was lost is not entered twice', () => {
    expect(plan([entry({ absorbance: '0.50' })], [reading({})])).toEqual([])
    expect(plan([entry({ absorbance: '0.50', supersedes: '100' })], [reading({ readBy: 'other' })])).toEqual(
      [],
    )
  })
  it('typed 0.5 for 0.50 is a correction, in a spreadsheet it is the same number', () => {
    expect(refusal(() => plan([entry({ absorbance: '0.5', supersedes: '100' })], [reading({})])).code).toBe(
      'invalid-input',
    )
    expect(plan([entry({ absorbance: '0.5', supersedes: '100' })], [reading({})], true)).toEqual([])
  })
  it('every bad entry is named, and nothing is planned', () => {
    const bad = refusal(() =>
      plan([
        entry({ positionId: '9' }),
        entry({ replicate: 3 }),
        entry(),
        entry(),
        entry({ positionId: '2', supersedes: '7' }),
      ]),
    )
    expect(bad.errors.map(({ path, message }) => `${path}: ${message}`)).toEqual([
      'readings.0: There is no such position in this batch.',
      'readings.1: Each position is read 2 times in this batch.',
      'readings.3: This cell is given twice.',
      'readings.4: Position 2, reading 1: there is no reading to correct.',
    ])
  })
})
