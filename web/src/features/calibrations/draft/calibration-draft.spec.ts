import { saveCalibration } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import {
  assessDraft,
  bodyOf,
  changedReadings,
  concentrationProblem,
  draftOf,
  idInKey,
  isSameDraft,
  placeOf,
  readingProblem,
  setCell,
} from './calibration-draft'
import { aDraft, aStandard, aView, ironMethod } from './draft.test-support'
import { withError } from './number-texts'

describe('a draft and the server', () => {
  it('comes back from the server as it was sent', () => {
    const draft = aDraft()
    expect(isSameDraft(draftOf(aView(draft)), draft)).toBe(true)
  })

  it('is a body that the contract takes, empty cells and all', () => {
    const draft = aDraft({
      standards: [aStandard({ readings: ['0.1', '', '0.2'] }), aStandard({ readings: [] })],
    })
    const parsed = saveCalibration.body.safeParse({ version: 1, ...bodyOf(draft) })
    expect(parsed.error?.issues).toBeUndefined()
    expect(parsed.data?.standards[1]?.readings).toEqual([''])
  })

  it('names the rows the server has by their ids', () => {
    const sent = bodyOf(aDraft({ standards: [aStandard({ key: 's7' }), aStandard({ key: 'new' })] }), idInKey)
    expect(sent.standards.map((row) => row.id)).toEqual(['7', null])
  })

  it('finds the cell of a complaint', () => {
    const draft = aDraft()
    expect(placeOf('standards.1.readings.0', draft)).toEqual({ rowKey: 's2', columnKey: '1' })
    expect(placeOf('standards.0.concentration', draft)).toEqual({ rowKey: 's1', columnKey: 'concentration' })
    expect(placeOf('standards.7.readings.0', draft)).toBeNull()
    expect(placeOf('stockLotId', draft)).toBeNull()
  })
})

describe('saved readings that change', () => {
  const base = aDraft()
  it('are named, a first reading is not', () => {
    const changed = setCell(base, { rowKey: 's1', columnKey: '2', text: '0.1983' })
    expect(changedReadings(base, changed)).toEqual(['s1 2'])
    const added = setCell(base, { rowKey: 's1', columnKey: '4', text: '0.2' })
    expect(added.standards[0]?.readings).toEqual(['0.1994', '0.1982', '', '0.2'])
    expect(changedReadings(base, added)).toEqual([])
  })
  it('count when their row goes', () => {
    expect(changedReadings(base, { ...base, standards: base.standards.slice(1) })).toEqual(['s1 1', 's1 2'])
  })
})

describe('what stands in a cell', () => {
  it.each([
    ['0,39', 'Use a decimal point: 0.39.'],
    ['abc', '“abc” is not a number.'],
    ['9', 'The absorbance must lie between -0.5 and 4.'],
  ])('%s is refused with a sentence', (text, sentence) => {
    expect(readingProblem(text)).toBe(sentence)
  })
  it('may be empty for a reading, not for a concentration', () => {
    expect(readingProblem('')).toBeNull()
    expect(concentrationProblem('')).toBe('Enter the concentration.')
  })
})

describe('what is computed as typed', () => {
  // Published iron calibration, domain facts section 7 #1 (student report, read): slope 10553.63 ± 190.5558 L/mol, intercept
  // −0.00363 ± 0.007721. Here in mg/L, so the slope is divided by the molar mass in mg/mol.
  const molar = [6.2424e-5, 5.202e-5, 4.1616e-5, 3.1212e-5, 2.0808e-5, 1.0404e-5]
  const absorbances = ['0.662', '0.545', '0.432', '0.313', '0.2195', '0.1125']
  const method = ironMethod()
  const perMilligram = method.molarMass * 1000
  const published = aDraft({
    standards: molar.map((concentration, index) =>
      aStandard({
        key: `s${index}`,
        concentration: String(concentration * perMilligram),
        readings: [absorbances[index] ?? ''],
      }),
    ),
  })

  it('gives the published line', () => {
    const { stored } = assessDraft(published, method)
    expect((stored?.slope ?? 0) * perMilligram).toBeCloseTo(10553.63, 2)
    expect((stored?.slopeError ?? 0) * perMilligram).toBeCloseTo(190.5558, 3)
    expect(stored?.intercept).toBeCloseTo(-0.00363, 5)
    expect(stored?.interceptError).toBeCloseTo(0.007721, 6)
    expect(withError(stored?.intercept ?? 0, stored?.interceptError ?? 0)).toBe('−0.0036 ± 0.0077')
  })

  it('leaves cells aside that are no numbers, and rows without a concentration', () => {
    const withSlips = {
      ...published,
      standards: [
        ...published.standards.map((row) => ({ ...row, readings: [...row.readings, '0,5', ''] })),
        aStandard({ key: 'new', concentration: '', readings: ['0.3'] }),
      ],
    }
    expect(assessDraft(withSlips, method).stored).toEqual(assessDraft(published, method).stored)
  })

  it('says why there is no curve yet', () => {
    const one = assessDraft({ ...published, standards: published.standards.slice(0, 1) }, method)
    expect(one.stored).toBeNull()
    expect(one.refusal).toMatch(/\w/)
  })

  it('takes a standard out of the fit and still reads it back', () => {
    const [first, ...others] = published.standards
    const out = assessDraft(
      {
        ...published,
        standards: [{ ...(first ?? aStandard()), leftOutReason: 'bubble in the cell' }, ...others],
      },
      method,
    )
    expect(out.fit?.n).toBe(5)
    expect(out.readBack.get('s0')?.concentration).toBeGreaterThan(3)
  })
})
