import { describe, expect, it } from 'vitest'
import { aBatch, aPosition, aReading, assessed } from '../batches/run-sheet/batch.test-support'
import { reviewChecks } from './review-checks'

// constructed throughout: a line of 0.2 per mg/L
const read = (part: Parameters<typeof aPosition>[0], ...texts: string[]) =>
  aPosition({ limits: [], ...part, readings: texts.map((text, index) => aReading(index + 1, text)) })
const check = (rows: ReturnType<typeof aPosition>[], what: string) =>
  reviewChecks(assessed(aBatch(rows))).find((each) => each.what === what)

describe('what the record decides for the reviewer', () => {
  it('counts the cells', () => {
    expect(check([read({}, '0.1', '0.1')], 'Every cell read')).toMatchObject({
      found: '2 of 2',
      outcome: 'pass',
    })
    expect(check([read({}, '0.1')], 'Every cell read')).toMatchObject({ found: '1 of 2', outcome: 'fail' })
  })
  it('says what each control found, and that one is missing', () => {
    const good = read({ kind: 'control', expected: '1.00' }, '0.2', '0.2002')
    expect(check([good], 'Control sample')).toMatchObject({ outcome: 'pass' })
    expect(check([good], 'Method blank')).toEqual({ what: 'Method blank', found: 'missing', outcome: 'fail' })
    const bad = read({ kind: 'control', expected: '2.00' }, '0.2', '0.2002')
    expect(check([bad], 'Control sample')).toMatchObject({ outcome: 'fail' })
  })
  it('asks for a spike only where one was made', () => {
    expect(check([read({}, '0.1', '0.1')], 'Spike')).toBeUndefined()
  })
  it('marks what lies above the curve and readings that disagree', () => {
    const high = read({}, '0.9', '0.9')
    expect(check([high], 'Inside the curve')).toMatchObject({ found: '1 above it', outcome: 'fail' })
    const apart = read({}, '0.10', '0.15')
    expect(check([apart], 'Readings of a position agree')).toMatchObject({ outcome: 'warn' })
  })
  it('does not judge a colour window whose start nobody recorded', () => {
    expect(check([read({}, '0.1', '0.1')], 'Read in the colour window')).toMatchObject({
      outcome: 'not-judged',
    })
  })
})
