import { z } from 'zod'
import { LIMITS } from '../limits.js'
import {
  absorbanceText,
  analyteCode,
  concentrationText,
  decimalText,
  form,
  id,
  idParams,
  instant,
  note,
  pageOf,
  pageQuery,
  person,
  reason,
  signature,
  signing,
  version,
  versionedReason,
} from './common.js'
import { defineEndpoint } from './endpoint.js'

export const calibrationState = z.enum([
  'draft',
  'submitted',
  'in-force',
  'expired',
  'invalidated',
  'replaced',
  'rejected',
])
export const calibrationModel = z.enum(['linear', 'linear-through-origin', 'quadratic'])
export const calibrationWeighting = z.enum(['none', 'inverse-concentration', 'inverse-concentration-squared'])

/** What the criteria of the method say of this calibration. */
export const criterion = z.object({
  code: z.string(),
  what: z.string(),
  found: z.string(),
  limit: z.string(),
  outcome: z.enum(['pass', 'fail', 'warn', 'not-judged']),
})
export type Criterion = z.infer<typeof criterion>

/** The engine's fit, kept whole (shape of `fitCalibration` in the engine) with what was derived from it. */
export const storedFit = z.object({
  engineVersion: z.string(),
  fit: z.record(z.string(), z.unknown()),
  slope: z.number(),
  slopeError: z.number(),
  intercept: z.number(),
  interceptError: z.number(),
  correlation: z.number(),
  rSquared: z.number(),
  residualStandardDeviation: z.number(),
  molarAbsorptivity: z.number().nullable(),
  detectionLimit: z.number().nullable(),
  quantificationLimit: z.number().nullable(),
})

export const standardView = z.object({
  id,
  position: z.number(),
  role: z.enum(['standard', 'second-source']),
  concentration: z.string(),
  lotId: id.nullable(),
  lotNumber: z.string().nullable(),
  readings: z.array(
    z.object({
      id,
      replicate: z.number(),
      absorbance: z.string(),
      readAt: instant,
      readBy: person,
      corrected: z.boolean(),
    }),
  ),
  /** left out of the fit, with the technical reason */
  leftOutReason: z.string(),
})
export const calibrationRow = z.object({
  id,
  number: z.string(),
  methodId: id,
  methodTitle: z.string(),
  analyte: analyteCode,
  form,
  instrumentId: id,
  instrumentName: z.string(),
  cellPathCm: z.string(),
  state: calibrationState,
  preparedBy: person,
  submittedAt: instant.nullable(),
  validUntil: instant.nullable(),
  slope: z.number().nullable(),
  correlation: z.number().nullable(),
  criteriaFailed: z.number(),
  version,
})
export const correctionView = z.object({
  what: z.string(),
  from: z.string(),
  to: z.string(),
  by: z.string(),
  at: instant,
  reason: z.string(),
})
export const calibrationView = calibrationRow.extend({
  wavelengthNm: z.number(),
  model: calibrationModel,
  weighting: calibrationWeighting,
  stockLotId: id.nullable(),
  stockLotNumber: z.string().nullable(),
  reagentLots: z.array(z.object({ id, number: z.string(), name: z.string() })),
  standards: z.array(standardView),
  colourStartedAt: instant.nullable(),
  temperatureC: z.string(),
  note: z.string(),
  createdAt: instant,
  stored: storedFit.nullable(),
  criteria: z.array(criterion),
  signatures: z.array(signature),
  corrections: z.array(correctionView),
  returnedReason: z.string(),
  /** why it was signed although a criterion failed */
  justification: z.string(),
  /** why it was taken out of force */
  endedReason: z.string(),
  validFrom: instant.nullable(),
  replacedBy: z.object({ id, number: z.string() }).nullable(),
  batches: z.array(z.object({ id, number: z.string() })),
})
export type CalibrationView = z.infer<typeof calibrationView>

const standardBody = z.object({
  /** of a standard already saved; without it standards are recognised by their order */
  id: id.nullish(),
  role: z.enum(['standard', 'second-source']),
  concentration: concentrationText,
  lotId: id.nullable(),
  readings: z
    .array(absorbanceText.or(z.literal('')))
    .min(1)
    .max(LIMITS.replicates),
  leftOutReason: note.default(''),
})
const calibrationBody = {
  instrumentId: id,
  cellPathCm: decimalText({ low: 0.1, high: 20, what: 'cell path', unit: 'cm' }),
  model: calibrationModel,
  weighting: calibrationWeighting,
  stockLotId: id.nullable(),
  reagentLotIds: z.array(id).max(12),
  colourStartedAt: instant.nullable(),
  temperatureC: z.union([
    z.literal(''),
    decimalText({ ...LIMITS.temperature, what: 'temperature', unit: '°C' }),
  ]),
  note,
  standards: z.array(standardBody).max(LIMITS.standards),
}
export const listCalibrations = defineEndpoint({
  name: 'listCalibrations',
  summary: 'Calibrations, newest first',
  method: 'GET',
  path: '/calibrations',
  permission: 'calibrations.read',
  query: pageQuery.extend({ state: calibrationState.optional(), methodId: id.optional() }),
  response: pageOf(calibrationRow),
})
export const getCalibration = defineEndpoint({
  name: 'getCalibration',
  summary: 'One calibration whole',
  method: 'GET',
  path: '/calibrations/:id',
  permission: 'calibrations.read',
  params: idParams,
  response: calibrationView,
})
export const startCalibration = defineEndpoint({
  name: 'startCalibration',
  summary: 'Start a draft',
  method: 'POST',
  path: '/calibrations',
  permission: 'calibrations.prepare',
  body: z.object({ draftId: z.uuid(), methodId: id, ...calibrationBody }),
  response: calibrationView,
})
export const saveCalibration = defineEndpoint({
  name: 'saveCalibration',
  summary: 'Save a draft; a changed reading supersedes the earlier one, both are kept',
  method: 'PUT',
  path: '/calibrations/:id',
  permission: 'calibrations.prepare',
  params: idParams,
  body: z.object({ version, reason: reason.optional(), ...calibrationBody }),
  response: calibrationView,
})
export const submitCalibration = defineEndpoint({
  name: 'submitCalibration',
  summary: 'Submit for signature',
  method: 'POST',
  path: '/calibrations/:id/submit',
  permission: 'calibrations.prepare',
  params: idParams,
  body: z.object({ version }),
  response: calibrationView,
})
export const signCalibration = defineEndpoint({
  name: 'signCalibration',
  summary: 'Sign for use',
  method: 'POST',
  path: '/calibrations/:id/sign',
  permission: 'calibrations.sign',
  params: idParams,
  body: signing.extend({ justification: note.default('') }),
  response: calibrationView,
})
export const sendBackCalibration = defineEndpoint({
  name: 'sendBackCalibration',
  summary: 'Send back with a reason; the technician starts over from a copy',
  method: 'POST',
  path: '/calibrations/:id/reject',
  permission: 'calibrations.sign',
  params: idParams,
  body: versionedReason,
  response: calibrationView,
})
export const invalidateCalibration = defineEndpoint({
  name: 'invalidateCalibration',
  summary: 'Take a calibration out of force',
  method: 'POST',
  path: '/calibrations/:id/invalidate',
  permission: 'calibrations.sign',
  params: idParams,
  body: versionedReason,
  response: calibrationView,
})
export const copyCalibration = defineEndpoint({
  name: 'copyCalibration',
  summary: 'Start a new draft with the set-up of this one, without its readings',
  method: 'POST',
  path: '/calibrations/:id/copy',
  permission: 'calibrations.prepare',
  params: idParams,
  body: z.object({ draftId: z.uuid() }),
  response: calibrationView,
})
export const calibrationEndpoints = [
  listCalibrations,
  getCalibration,
  startCalibration,
  saveCalibration,
  submitCalibration,
  signCalibration,
  sendBackCalibration,
  invalidateCalibration,
  copyCalibration,
]
