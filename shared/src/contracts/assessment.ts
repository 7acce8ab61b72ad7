import { z } from 'zod'
import { id, verdict } from './common.js'
import { calibrationModel, calibrationWeighting } from './calibrations.js'

/** Everything a reading is judged by: the page computes the live preview from it with the same engine. */
export const assessmentRules = z.object({
  fit: z.record(z.string(), z.unknown()),
  engineVersion: z.string(),
  cellPathCm: z.string(),
  calibrationModel,
  calibrationWeighting,
  /** mg/L */
  detectionLimit: z.number(),
  quantificationLimit: z.number(),
  reportingLimit: z.number(),
  /** relative standard uncertainties added in quadrature to that of the inverse prediction, as fractions */
  uncertaintyComponents: z.array(
    z.object({ name: z.string(), value: z.number(), kind: z.enum(['absolute', 'relative']) }),
  ),
  readableAbsorbance: z.object({ low: z.number(), high: z.number() }),
  verificationTolerancePercent: z.number(),
  controlLowPercent: z.number(),
  controlHighPercent: z.number(),
  duplicateTolerancePercent: z.number(),
  spikeLowPercent: z.number(),
  spikeHighPercent: z.number(),
  /** mg/L, a method blank must stay below … */
  blankLimit: z.number(),
  /** … or hold at most this part of what any sample of the run holds; absent in batches opened before it was judged */
  blankSamplePart: z.number().optional(),
  /** mg/L, the blank after a verification standard must stay below; absent where `blankLimit` was its limit */
  verificationBlankLimit: z.number().optional(),
})
export type AssessmentRules = z.infer<typeof assessmentRules>
export const positionLimit = z.object({
  id,
  name: z.string(),
  kind: z.string(),
  value: z.string(),
  unit: z.enum(['mg/L', 'ug/L']),
  digits: z.number(),
  rule: z.enum(['simple', 'rounded', 'guarded', 'four-zone']),
  source: z.string(),
})
export type PositionLimit = z.infer<typeof positionLimit>
export const reportingRules = z.object({
  displayUnit: z.enum(['mg/L', 'ug/L']),
  ties: z.enum(['half-up', 'half-even']),
  nonDetect: z.string(),
  digits: z.number(),
})
export type ReportingRules = z.infer<typeof reportingRules>
/** What the readings of one position come to. Computed by `assessPosition` of shared/worksheet, on the page and on the server. */
export const assessment = z.object({
  meanAbsorbance: z.number().nullable(),
  concentration: z.number().nullable(),
  standardError: z.number().nullable(),
  expandedUncertainty: z.number().nullable(),
  /** the number as reported, without unit and uncertainty */
  reportedText: z.string().nullable(),
  uncertaintyText: z.string().nullable(),
  /** mg/L, by the programme's rule for values below the limits */
  numericForCompliance: z.number().nullable(),
  unit: z.enum(['mg/L', 'ug/L']).nullable(),
  flags: z.array(z.string()),
  /** the quality-control figure in words, e.g. `99.8 %`, `3.6 % apart` */
  qcText: z.string().nullable(),
  qcValue: z.number().nullable(),
  qcPassed: z.boolean().nullable(),
  verdict: verdict.nullable(),
  limit: positionLimit.nullable(),
  explanation: z.string(),
})
export type Assessment = z.infer<typeof assessment>
