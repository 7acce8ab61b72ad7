import { describe, expect, it } from 'vitest'
import { fitCalibration } from '../assay/index.js'
import type { AssessmentRules } from '../contracts/index.js'
import { assessRun, type RunPosition } from './assess-run.js'
import { findInBatch } from './find-in-batch.js'

/*
 * The rule of a contaminated method blank: at or above the reporting limit and above a tenth of a sample's amount
 * (Maine chapter 263, section 11, as read); the blank after a verification standard stays below half the reporting limit
 * (Standard Methods 2020, as read). The line (0.2 A per mg/L, no intercept) and its readings are constructed.
 */
const fit = fitCalibration({
  model: 'linear-through-origin',
  points: [0.5, 1, 2, 4].map((concentration) => ({ concentration, absorbance: 0.2 * concentration })),
})
const rules: AssessmentRules = {
  fit: fit as unknown as Record<string, unknown>,
  engineVersion: '1.0.1',
  cellPathCm: '1',
  calibrationModel: 'linear-through-origin',
  calibrationWeighting: 'none',
  detectionLimit: 0.01,
  quantificationLimit: 0.04,
  reportingLimit: 0.04,
  uncertaintyComponents: [],
  readableAbsorbance: { low: 0.05, high: 1.5 },
  verificationTolerancePercent: 10,
  controlLowPercent: 90,
  controlHighPercent: 110,
  duplicateTolerancePercent: 20,
  spikeLowPercent: 75,
  spikeHighPercent: 125,
  blankLimit: 0.04,
  blankSamplePart: 0.1,
  verificationBlankLimit: 0.02,
}

const position = (id: string, kind: RunPosition['kind'], milligrams: number | null): RunPosition => ({
  id,
  ofPositionId: null,
  kind,
  absorbances: milligrams === null ? [] : [0.2 * milligrams],
  dilution: 1,
  expected: null,
  added: null,
  limits: [],
  reporting: { displayUnit: 'mg/L', ties: 'half-even', nonDetect: 'as-measured', digits: 3 },
})
const blankOf = (samples: (number | null)[], under = rules) =>
  assessRun(
    [
      position('blank', 'method-blank', 0.05),
      ...samples.map((each, index) => position(`${index}`, 'sample', each)),
    ],
    under,
  ).get('blank')

describe('a method blank at 0.05 mg/L, over its limit of 0.04', () => {
  it('does no harm where the poorest sample holds ten times as much', () => {
    expect(blankOf([0.51, 2])).toMatchObject({ qcPassed: true, qcText: 'at most 0.1 of every sample' })
  })

  it('fails where one sample holds less than ten times as much', () => {
    expect(blankOf([0.49, 2])).toMatchObject({
      qcPassed: false,
      qcText: 'not below 0.04 mg/L',
      explanation: 'and more than 0.1 of what a sample of the run holds',
    })
  })

  it('fails while a sample is not read, and where there is none', () => {
    expect(blankOf([2, null])).toMatchObject({ qcPassed: false })
    expect(blankOf([])).toMatchObject({ qcPassed: false })
  })

  it('fails by its limit alone in a batch opened before samples were asked', () => {
    const { blankSamplePart: _, verificationBlankLimit: __, ...before } = rules
    expect(blankOf([0.51, 2], before)).toMatchObject({ qcPassed: false, explanation: '' })
  })
})

describe('the blank after a verification standard', () => {
  const found = (milligrams: number, under = rules) =>
    assessRun([position('blank', 'blank', milligrams)], under).get('blank')

  it('stays below half the reporting limit', () => {
    expect(found(0.019)).toMatchObject({ qcPassed: true, qcText: 'below 0.02 mg/L' })
    expect(found(0.021)).toMatchObject({ qcPassed: false, qcText: 'not below 0.02 mg/L' })
  })
})

it('a blank that passes by the samples alone is told to the reviewer', () => {
  const run = [position('blank', 'method-blank', 0.05), position('rich', 'sample', 2)]
  const assessed = assessRun(run, rules)
  const { findings } = findInBatch({
    positions: run.flatMap(({ id, kind }, index) => {
      const assessment = assessed.get(id)
      if (!assessment) return []
      return [{ id, position: index + 1, kind, label: id, readings: [], assessment, holdingDueAt: null }]
    }),
    rules,
    colour: null,
  })
  expect(findings).toContainEqual(
    expect.objectContaining({
      positionId: 'blank',
      severity: 'caution',
      what: 'Method blank: not below 0.04 mg/L, yet at most 0.1 of what any sample of the run holds.',
    }),
  )
})
