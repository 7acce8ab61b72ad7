import { describe, expect, it } from 'vitest'
import { runValidationCases, type ValidationCase } from './validation.js'
import { ENGINE_VERSION } from './version.js'

/* Constructed cases: what is tested is the judge, not the engine. */
const good: ValidationCase = {
  id: 'good',
  title: 'energy at 510 nm',
  source: 'domain facts, section 5',
  mark: 'computed',
  function: 'transitionEnergy',
  input: { wavelengthNm: 510 },
  expected: { kJPerMol: 234.56 },
  tolerance: { absolute: 0.005 },
}
const now = '2026-12-01T08:00:00Z'
const run = (...cases: ValidationCase[]) => runValidationCases(cases, { now })

describe('runValidationCases', () => {
  it('reports source, expected, got, difference, tolerance, version and time', () => {
    const report = run(good)
    expect(report).toMatchObject({ engineVersion: ENGINE_VERSION, at: now, cases: 1, passed: 1, failed: 0 })
    const [check] = report.rows[0]?.checks ?? []
    expect(check).toMatchObject({ path: 'kJPerMol', expected: 234.56, tolerance: 0.005, verdict: 'pass' })
    expect(check?.difference).toBeCloseTo(0.0018934, 6)
  })

  it.each([
    ['a number outside its tolerance', { ...good, expected: { kJPerMol: 234.57 } }],
    ['a number without tolerance that is not equal', { ...good, tolerance: {} }],
    ['a path that is not there', { ...good, expected: { joule: 234.56 } }],
    ['a function that is not there', { ...good, function: 'nothing' }],
    ['a refusal where a number was expected', { ...good, input: { wavelengthNm: 0 } }],
    ['an answer where a refusal was expected', { ...good, expected: { error: 'invalid-argument' } }],
    ['a text that differs', { ...good, function: 'complementaryHue', expected: { seen: 'blue' } }],
  ])('fails %s', (_what, entry) => {
    expect(run(entry)).toMatchObject({ passed: 0, failed: 1 })
  })

  it('computes nested calls first and spreads a list of arguments', () => {
    const nested: ValidationCase = {
      ...good,
      id: 'nested',
      function: 'roundReported',
      input: [
        { $call: 'convertUnit', input: { value: 0.0105, from: 'mg/L', to: 'ug/L' } },
        { to: 'decimals', digits: 2, ties: 'half-up' },
      ],
      expected: { result: '10.50' },
    }
    expect(run(good, nested)).toMatchObject({ cases: 2, passed: 2, comparisons: 2 })
  })

  it('lets one path have a tolerance of its own', () => {
    const entry = { ...good, tolerance: { paths: { kJPerMol: { relative: 1e-5 } } } }
    expect(run(entry).passed).toBe(1)
  })

  it('refuses two cases of one id and a case that expects nothing', () => {
    expect(() => run(good, good)).toThrow('stands there twice')
    expect(() => run({ ...good, expected: {} })).toThrow('expects nothing')
  })
})
