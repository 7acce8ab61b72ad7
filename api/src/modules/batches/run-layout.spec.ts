import { describe, expect, it } from 'vitest'
import { layRun } from './run-layout.js'

// Constructed from the rules: verification after every tenth sample and at the end, controls for every started 20.
const ids = (count: number) => Array.from({ length: count }, (_, index) => String(index + 1))
const lay = (count: number, changes: Partial<Parameters<typeof layRun>[0]> = {}) =>
  layRun({
    determinationIds: ids(count),
    duplicateOf: null,
    spikeOf: null,
    verificationEvery: 10,
    groupSize: 20,
    ...changes,
  })
const short = (laid: ReturnType<typeof layRun>) =>
  laid.map(({ kind, determinationId, ofDeterminationId }) => {
    const of = determinationId ?? ofDeterminationId
    return of === null ? kind : `${kind} ${of}`
  })

describe('the order of a run', () => {
  it('a short one: blank, verification, method blank, control, samples, duplicate, verification, blank', () => {
    expect(short(lay(2))).toEqual([
      'blank',
      'verification',
      'method-blank',
      'control',
      'sample 1',
      'sample 2',
      'duplicate 1',
      'verification',
      'blank',
    ])
  })
  it('duplicate and spike belong to the samples chosen', () => {
    expect(short(lay(3, { duplicateOf: '2', spikeOf: '3' })).slice(4, 9)).toEqual([
      'sample 1',
      'sample 2',
      'sample 3',
      'duplicate 2',
      'spike 3',
    ])
  })
  it('after ten samples comes a verification when more follow, not when they are the last', () => {
    expect(short(lay(10)).filter((one) => one === 'verification')).toHaveLength(2)
    const eleven = short(lay(11))
    expect(eleven.slice(14, 17)).toEqual(['verification', 'blank', 'sample 11'])
    expect(eleven.filter((one) => one === 'verification')).toHaveLength(3)
  })
  it('every started twenty has a method blank, a control and a duplicate of its own', () => {
    const laid = short(lay(21, { duplicateOf: '5' }))
    expect(laid.filter((one) => one === 'method-blank')).toHaveLength(2)
    expect(laid.filter((one) => one.startsWith('duplicate'))).toEqual(['duplicate 5', 'duplicate 21'])
    expect(laid.at(-1)).toBe('blank')
  })
  it.each([1, 9, 10, 19, 20, 30, 41, 60])(
    '%i samples: never more than ten between two verifications',
    (count) => {
      let since = 0
      for (const { kind } of lay(count)) {
        if (kind === 'verification') since = 0
        if (kind === 'sample') since += 1
        expect(since).toBeLessThanOrEqual(10)
      }
      expect(lay(count).filter(({ kind }) => kind === 'sample')).toHaveLength(count)
    },
  )
})
