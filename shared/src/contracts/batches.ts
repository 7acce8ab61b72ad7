import { z } from 'zod'
import { LIMITS } from '../limits.js'
import {
  absorbanceText,
  analyteCode,
  concentrationText,
  dilutionText,
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
import { assessment, assessmentRules, positionLimit, reportingRules } from './assessment.js'
import { correctionView } from './calibrations.js'
import { defineEndpoint } from './endpoint.js'
import { holdingTime } from './samples.js'

export const batchState = z.enum(['open', 'submitted', 'reviewed', 'released', 'returned'])
export const positionKind = z.enum([
  'blank',
  'verification',
  'method-blank',
  'control',
  'sample',
  'duplicate',
  'spike',
])

export const positionView = z.object({
  id,
  position: z.number(),
  kind: positionKind,
  label: z.string(),
  determinationId: id.nullable(),
  sampleId: id.nullable(),
  sampleNumber: z.string().nullable(),
  pointName: z.string().nullable(),
  clientName: z.string().nullable(),
  ofPositionId: id.nullable(),
  ofPosition: z.number().nullable(),
  expected: z.string().nullable(),
  added: z.string().nullable(),
  lotId: id.nullable(),
  lotNumber: z.string().nullable(),
  dilution: z.string(),
  note: z.string(),
  holding: holdingTime.nullable(),
  colourStartedAt: instant.nullable(),
  readings: z.array(
    z.object({
      id,
      replicate: z.number(),
      absorbance: z.string(),
      readAt: instant,
      readBy: person,
      source: z.string(),
      corrected: z.boolean(),
    }),
  ),
  limits: z.array(positionLimit),
  reporting: reportingRules,
  assessment,
  /** of the stored result, once the batch has been submitted: opens the number's story */
  resultId: id.nullable(),
  version,
})
export type PositionView = z.infer<typeof positionView>
export const batchFinding = z.object({
  id: z.string(),
  positionId: id.nullable(),
  position: z.number().nullable(),
  what: z.string(),
  severity: z.enum(['failed', 'caution']),
  /** what was done about it; null while nothing is recorded */
  action: z
    .object({
      kind: z.enum(['read-again', 'flagged', 'explained', 'rerun']),
      text: z.string(),
      by: z.string(),
      at: instant,
    })
    .nullable(),
})
export const batchRow = z.object({
  id,
  number: z.string(),
  methodId: id,
  methodTitle: z.string(),
  analyte: analyteCode,
  form,
  calibrationId: id,
  calibrationNumber: z.string(),
  state: batchState,
  openedBy: person,
  openedAt: instant,
  submittedAt: instant.nullable(),
  releasedAt: instant.nullable(),
  positions: z.number(),
  read: z.number(),
  samples: z.number(),
  aboveLimit: z.number(),
  findings: z.number(),
  reviewDueAt: instant.nullable(),
  version,
})
export const batchView = batchRow.extend({
  instrumentId: id,
  instrumentName: z.string(),
  wavelengthNm: z.number(),
  replicates: z.number(),
  calibrationValidUntil: instant.nullable(),
  cellPathCm: z.string(),
  colourWindow: z.object({ fromMinutes: z.number(), toMinutes: z.number() }).nullable(),
  band: z.object({ peakNm: z.number(), widthShortNm: z.number(), widthLongNm: z.number() }),
  cautions: z.array(z.string()),
  reagentLots: z.array(z.object({ id, number: z.string(), name: z.string() })),
  rows: z.array(positionView),
  rules: assessmentRules,
  findingsList: z.array(batchFinding),
  corrections: z.array(correctionView),
  signatures: z.array(signature),
  returnedReason: z.string(),
  note: z.string(),
  colourStartedAt: instant.nullable(),
  /** who else has this batch open in the last minute */
  alsoHere: z.array(z.string()),
})
export type BatchView = z.infer<typeof batchView>

export const listBatches = defineEndpoint({
  name: 'listBatches',
  summary: 'Batches, newest first',
  method: 'GET',
  path: '/batches',
  permission: 'batches.read',
  query: pageQuery.extend({ state: batchState.optional(), methodId: id.optional() }),
  response: pageOf(batchRow),
})
export const getBatch = defineEndpoint({
  name: 'getBatch',
  summary: 'One batch with its run sheet',
  method: 'GET',
  path: '/batches/:id',
  permission: 'batches.read',
  params: idParams,
  response: batchView,
})
export const openBatch = defineEndpoint({
  name: 'openBatch',
  summary: 'Make a batch from waiting determinations, with its quality-control positions',
  method: 'POST',
  path: '/batches',
  permission: 'batches.run',
  body: z
    .object({
      draftId: z.uuid(),
      methodId: id,
      calibrationId: id,
      replicates: z.number().int().min(1).max(LIMITS.replicates),
      determinationIds: z
        .array(id)
        .min(1, 'Choose at least one waiting determination.')
        .max(LIMITS.batchPositions),
      verificationConcentration: concentrationText,
      verificationLotId: id.nullable(),
      controlConcentration: concentrationText,
      controlLotId: id.nullable(),
      /** which of the determinations is measured twice; the first when null */
      duplicateOf: id.nullable(),
      spikeOf: id.nullable(),
      spikeAdded: concentrationText.nullable(),
      reagentLotIds: z.array(id).max(12),
      colourStartedAt: instant.nullable(),
      note,
    })
    .refine((v) => !v.spikeOf || v.spikeAdded, {
      path: ['spikeAdded'],
      message: 'Enter the concentration added.',
    }),
  response: batchView,
})
const readingEntry = z.object({
  positionId: id,
  replicate: z.number().int().min(1).max(LIMITS.replicates),
  absorbance: absorbanceText,
  reason: reason.optional(),
  /** the reading the person saw in this cell, so that two people never overwrite each other unseen; null for an empty cell */
  supersedes: id.nullable(),
})
export const saveReadings = defineEndpoint({
  name: 'saveReadings',
  summary: 'Save readings; a changed one supersedes the earlier with a reason',
  method: 'POST',
  path: '/batches/:id/readings',
  permission: 'batches.run',
  params: idParams,
  body: z.object({
    source: z.enum(['typed', 'pasted']),
    readings: z
      .array(readingEntry)
      .min(1)
      .max(LIMITS.batchPositions * LIMITS.replicates),
  }),
  response: batchView,
})
export const changePosition = defineEndpoint({
  name: 'changePosition',
  summary: 'Set dilution and note of a position',
  method: 'PUT',
  path: '/positions/:id',
  permission: 'batches.run',
  params: idParams,
  body: z.object({ version, dilution: dilutionText, note, reason: reason.optional() }),
  response: batchView,
})
export const changeBatch = defineEndpoint({
  name: 'changeBatch',
  summary: 'Set when the colour reagent was added, and the note',
  method: 'PUT',
  path: '/batches/:id',
  permission: 'batches.run',
  params: idParams,
  body: z.object({ version, colourStartedAt: instant.nullable(), note }),
  response: batchView,
})
export const addVerification = defineEndpoint({
  name: 'addVerification',
  summary: 'Add a verification standard and blank at the end of the run',
  method: 'POST',
  path: '/batches/:id/verifications',
  permission: 'batches.run',
  params: idParams,
  body: z.object({ version }),
  response: batchView,
})
export const recordFindingAction = defineEndpoint({
  name: 'recordFindingAction',
  summary: 'Say what was done about a failed check',
  method: 'POST',
  path: '/batches/:id/findings',
  permission: 'batches.run',
  params: idParams,
  body: z.object({
    findingId: z.string().max(80),
    kind: z.enum(['read-again', 'flagged', 'explained', 'rerun']),
    text: reason,
  }),
  response: batchView,
})
export const readingsPreview = z.object({
  uploadId: id,
  fileName: z.string(),
  sha256: z.string(),
  good: z.number(),
  bad: z.number(),
  rows: z.array(
    z.object({
      row: z.number(),
      ok: z.boolean(),
      position: z.string(),
      label: z.string(),
      readings: z.array(z.string()),
      current: z.array(z.string()),
      problems: z.array(z.object({ column: z.string(), message: z.string() })),
    }),
  ),
})
export const previewReadings = defineEndpoint({
  name: 'previewReadings',
  summary: 'Read a file of absorbances (xlsx or csv) and say what it would enter',
  method: 'POST',
  path: '/batches/:id/uploads',
  permission: 'batches.run',
  params: idParams,
  upload: true,
  response: readingsPreview,
})
export const applyReadings = defineEndpoint({
  name: 'applyReadings',
  summary: 'Enter the readings of a previewed file; all or none',
  method: 'POST',
  path: '/batches/:id/uploads/:uploadId/apply',
  permission: 'batches.run',
  params: z.object({ id, uploadId: id }),
  body: z.object({ reason: reason.optional() }),
  response: batchView,
})
export const runSheetFile = defineEndpoint({
  name: 'runSheetFile',
  summary: 'The run sheet as a workbook to fill in and load again',
  method: 'GET',
  path: '/batches/:id/run-sheet.xlsx',
  permission: 'batches.read',
  params: idParams,
  file: ['application/vnd.openxmlformats-officedocument.spreadsheetml.sheet'],
})
export const submitBatch = defineEndpoint({
  name: 'submitBatch',
  summary: 'Submit for review',
  method: 'POST',
  path: '/batches/:id/submit',
  permission: 'batches.run',
  params: idParams,
  body: z.object({ version }),
  response: batchView,
})
export const returnBatch = defineEndpoint({
  name: 'returnBatch',
  summary: 'Send back to the bench with a reason',
  method: 'POST',
  path: '/batches/:id/return',
  permission: 'batches.review',
  params: idParams,
  body: versionedReason,
  response: batchView,
})
export const releaseBatch = defineEndpoint({
  name: 'releaseBatch',
  summary: 'Review and release every result of the batch with a signature',
  method: 'POST',
  path: '/batches/:id/release',
  permission: 'batches.review',
  params: idParams,
  body: signing.extend({
    /** positions whose results are not reported but measured again */
    rerunPositionIds: z.array(id).default([]),
    comment: note.default(''),
  }),
  response: batchView,
})
export const batchEndpoints = [
  listBatches,
  getBatch,
  openBatch,
  saveReadings,
  changePosition,
  changeBatch,
  addVerification,
  recordFindingAction,
  previewReadings,
  applyReadings,
  runSheetFile,
  submitBatch,
  returnBatch,
  releaseBatch,
]
