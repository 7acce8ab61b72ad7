import { describe, expect, it } from 'vitest'
import { fitCalibration } from '../assay/index.js'
import type { AssessmentRules, PositionLimit } from '../contracts/index.js'
import { assessPosition, type PositionToAssess } from './assess-position.js'

/* Constructed: a manganese line that cannot see 0.05 mg/L in 1 cm. */
const fit = fitCalibration({
  model: 'linear',
  points: [0, 1, 2, 4, 8].map((concentration, index) => ({
    concentration,
    absorbance: 0.0437 * concentration + (index % 2 === 0 ? 0.0004 : -0.0004),
  })),
})
const rules: AssessmentRules = {
  fit: fit as unknown as Record<string, unknown>,
  engineVersion: '1.0.0',
  cellPathCm: '1',
  calibrationModel: 'linear',
  calibrationWeighting: 'none',
  detectionLimit: 0.08,
  quantificationLimit: 0.25,
  reportingLimit: 0.05,
  uncertaintyComponents: [],
  readableAbsorbance: { low: 0.05, high: 1.5 },
  verificationTolerancePercent: 10,
  controlLowPercent: 90,
  controlHighPercent: 110,
  duplicateTolerancePercent: 20,
  spikeLowPercent: 75,
  spikeHighPercent: 125,
  blankLimit: 0.05,
}
const limit: PositionLimit = {
  id: '1',
  name: 'Secondary level',
  kind: 'secondary',
  value: '0.05',
  unit: 'mg/L',
  digits: 1,
  rule: 'rounded',
  source: '40 CFR 143.3',
}
const sample = (absorbance: number, nonDetect: string, limits = [limit]) =>
  assessPosition(
    {
      kind: 'sample',
      absorbances: [absorbance],
      dilution: 1,
      expected: null,
      added: null,
      parent: null,
      limits,
      reporting: { displayUnit: 'mg/L', ties: 'half-up', nonDetect, digits: 2 },
    } satisfies PositionToAssess,
    rules,
  )

describe('a limit the method cannot see', () => {
  it('is no finding for a sample without the metal', () => {
    const found = sample(0.0005, 'less-than-loq')
    expect(found).toMatchObject({ reportedText: '<0.080', verdict: null, limit: null })
    expect(found.flags).toContain('quantification-above-limit')
    expect(found.explanation).toContain('nothing can be said')
  })

  it('does not hide a limit that can be judged', () => {
    const high = { ...limit, id: '2', name: 'Health advisory', value: '0.3' }
    expect(sample(0.0005, 'less-than-loq', [limit, high])).toMatchObject({
      verdict: 'below',
      limit: { name: 'Health advisory' },
    })
  })

  it('leaves a value that was measured above it a finding', () => {
    expect(sample(0.02, 'less-than-loq')).toMatchObject({
      verdict: 'above',
      limit: { name: 'Secondary level' },
    })
  })

  it('counts zero where the programme says so', () => {
    expect(sample(0.0005, 'zero')).toMatchObject({ verdict: 'below', numericForCompliance: 0 })
  })
})
