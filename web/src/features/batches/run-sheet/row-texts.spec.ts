import { describe, expect, it } from 'vitest'
import { aBatch, aPosition, aReading, assessed } from './batch.test-support'
import { commonUnit, flagWords, shownNumbers, verdictOf } from './row-texts'

// constructed throughout
const found = (part: Parameters<typeof aPosition>[0], absorbances: string[]) => {
  const row = aPosition({ ...part, readings: absorbances.map((text, index) => aReading(index + 1, text)) })
  const [first] = assessed(aBatch([row])).rows
  return { row, assessment: first?.assessment ?? row.assessment }
}

describe('the numbers of a row', () => {
  it('a sample shows what would be reported, the engine’s own text', () => {
    const { row, assessment } = found({}, ['0.1720', '0.1722'])
    const shown = shownNumbers(row, assessment)
    expect(shown.concentration).toBe(assessment.reportedText)
    expect(shown.uncertainty).toBe(`± ${assessment.uncertaintyText}`)
  })
  it('a small value is never shown as zero', () => {
    const { row, assessment } = found({}, ['0.0004', '0.0002'])
    expect(shownNumbers(row, assessment)).toEqual({ concentration: '<0.050', uncertainty: '' })
    expect(flagWords(row, assessment)).toContain('not detected')
  })
  it('a blank keeps its sign', () => {
    const { row, assessment } = found({ kind: 'blank', limits: [] }, ['-0.0030', '-0.0028'])
    expect(shownNumbers(row, assessment).concentration).toMatch(/^−0\.01\d+$/)
    expect(flagWords(row, assessment)).toEqual([])
  })
  it('an unread row shows nothing', () => {
    const row = aPosition()
    expect(shownNumbers(row, row.assessment)).toEqual({ concentration: '', uncertainty: '' })
    expect(verdictOf(row, row.assessment)).toBeNull()
  })
})

describe('the verdict of a row', () => {
  it.each([
    ['0.1720', 'above 0.3', 'triangle'],
    ['0.0300', 'below 0.3', 'disc'],
  ])('%s: %s', (text, words, shape) => {
    const { row, assessment } = found({}, [text, text])
    expect(verdictOf(row, assessment)).toMatchObject({ words, mark: { shape } })
  })
  it('names the unit where the limit is in another one', () => {
    const { row, assessment } = found(
      { reporting: { displayUnit: 'ug/L', ties: 'half-up', nonDetect: 'less-than-loq', digits: 2 } },
      ['0.1720', '0.1720'],
    )
    expect(verdictOf(row, assessment)?.words).toBe('above 0.3 mg/L')
  })
  it('says when no limit applies', () => {
    const { row, assessment } = found({ limits: [] }, ['0.1720', '0.1720'])
    expect(verdictOf(row, assessment)?.words).toBe('no limit')
  })
  it('is the check for quality control', () => {
    const good = found({ kind: 'control', expected: '1.00', limits: [] }, ['0.2000', '0.2002'])
    expect(verdictOf(good.row, good.assessment)?.mark.tone).toBe('meets')
    const bad = found({ kind: 'control', expected: '2.00', limits: [] }, ['0.2000', '0.2002'])
    expect(verdictOf(bad.row, bad.assessment)?.mark).toMatchObject({ shape: 'triangle', tone: 'above' })
  })
})

it('a column carries its unit only where all clients share it', () => {
  const other = aPosition({
    reporting: { displayUnit: 'ug/L', ties: 'half-up', nonDetect: 'less-than-loq', digits: 2 },
  })
  expect(commonUnit([aPosition(), aPosition()])).toBe('mg/L')
  expect(commonUnit([aPosition(), other])).toBeNull()
})
