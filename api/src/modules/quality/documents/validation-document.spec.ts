import { runValidationCases, type ValidationCase } from '@weirlight/shared/assay'
import { describe, expect, it } from 'vitest'
import { validationDocument } from './validation-document.js'

// Constructed: 510 nm is 234.56 kJ/mol, so the second case is wrong on purpose.
const good: ValidationCase = {
  id: 'good',
  title: 'energy at 510 nm',
  source: 'exact SI constants',
  mark: 'computed',
  function: 'transitionEnergy',
  input: { wavelengthNm: 510 },
  expected: { kJPerMol: 234.56 },
  tolerance: { absolute: 0.005 },
}
const wrong = { ...good, id: 'wrong', title: 'energy with a wrong answer', expected: { kJPerMol: 240 } }
const wordsOf = (...cases: ValidationCase[]) =>
  JSON.stringify(
    validationDocument(runValidationCases(cases, { now: '2026-12-01T08:00:00Z' }), {
      laboratory: 'Marrowfield',
      by: 'Somebody',
    }).content,
  )

describe('the validation report', () => {
  it('names a failing case first, in words, and counts it', () => {
    const words = wordsOf(good, wrong)
    expect(words).toContain('2 cases, 2 comparisons: 1 passed, 1 failed.')
    expect(words).toContain('Do not release results')
    expect(words.indexOf('energy with a wrong answer')).toBeLessThan(words.indexOf('energy at 510 nm'))
    expect(words).toContain('"text":"fail"')
  })

  it('says nothing of failing where nothing fails', () => {
    expect(wordsOf(good)).not.toMatch(/Do not release|"fail"/)
  })
})
