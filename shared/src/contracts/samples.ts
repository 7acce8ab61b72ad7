import { z } from 'zod'
import { LIMITS } from '../limits.js'
import {
  analyteCode,
  decimalText,
  form,
  id,
  idParams,
  instant,
  name,
  note,
  pageOf,
  pageQuery,
  person,
  reason,
  version,
  versionedReason,
} from './common.js'
import { defineEndpoint } from './endpoint.js'

export const sampleState = z.enum([
  'expected',
  'received',
  'accepted',
  'accepted-with-qualification',
  'rejected',
  'in-analysis',
  'reported',
  'disposed',
])
export const determinationState = z.enum([
  'requested',
  'in-batch',
  'measured',
  'reviewed',
  'released',
  'withdrawn',
])
export const purpose = z.enum(['compliance', 'operational'])
export const sampleKind = z.enum(['routine', 'confirmation', 'raw', 'process', 'special'])
export const preservation = z.enum(['none', 'nitric-acid', 'ammonium-sulfate-buffer'])
export const container = z.enum(['plastic', 'fluoropolymer', 'glass'])

export const holdingTime = z.object({
  dueAt: instant,
  remainingHours: z.number(),
  state: z.enum(['ok', 'soon', 'breached']),
  rule: z.string(),
})
export const determinationView = z.object({
  id,
  analyte: analyteCode,
  form,
  methodId: id,
  methodTitle: z.string(),
  state: determinationState,
  holding: holdingTime,
  batchId: id.nullable(),
  batchNumber: z.string().nullable(),
  resultId: id.nullable(),
  reportedText: z.string().nullable(),
  unit: z.string().nullable(),
  verdict: z.string().nullable(),
  version,
})
export const sampleRow = z.object({
  id,
  number: z.string(),
  clientId: id,
  clientName: z.string(),
  pointId: id,
  pointCode: z.string(),
  pointName: z.string(),
  state: sampleState,
  purpose,
  kind: sampleKind,
  collectedAt: instant,
  receivedAt: instant.nullable(),
  determinations: z.array(z.object({ analyte: analyteCode, form, state: determinationState })),
  /** the holding time that runs out first among unmeasured determinations */
  holding: holdingTime.nullable(),
})
export const acceptanceCheck = z.object({ check: z.string(), ok: z.boolean(), finding: z.string() })
export const sampleView = sampleRow.extend({
  collectedBy: z.string(),
  receivedBy: person.nullable(),
  preservation,
  ph: z.string(),
  temperatureC: z.string(),
  container,
  filteredInField: z.boolean(),
  condition: z.string(),
  remarks: z.string(),
  acceptanceReason: z.string(),
  clientConsent: z.string(),
  checks: z.array(acceptanceCheck),
  suggested: z.enum(['accepted', 'accepted-with-qualification', 'rejected']),
  details: z.array(determinationView),
  certificates: z.array(z.object({ id, number: z.string(), state: z.string() })),
  version,
})
export type SampleView = z.infer<typeof sampleView>

const wanted = z.object({ methodId: id })
export const receiveBody = z
  .object({
    /** made by the form once: the same form sent twice makes one sample */
    draftId: z.uuid(),
    clientId: id,
    pointId: id,
    purpose,
    kind: sampleKind,
    collectedAt: instant,
    collectedBy: name,
    receivedAt: instant,
    preservation,
    /** as read from strip or meter; empty when not measured */
    ph: z.union([z.literal(''), decimalText({ low: 0, high: 14, what: 'pH' })]),
    temperatureC: z.union([
      z.literal(''),
      decimalText({ ...LIMITS.temperature, what: 'temperature', unit: '°C' }),
    ]),
    container,
    filteredInField: z.boolean(),
    condition: note,
    remarks: note,
    determinations: z.array(wanted).min(1, 'Choose at least one determination.').max(12),
  })
  .superRefine((v, context) => {
    if (new Date(v.receivedAt) < new Date(v.collectedAt)) {
      context.addIssue({
        code: 'custom',
        path: ['receivedAt'],
        message: 'Received before it was collected: check both times.',
      })
    }
    const seen = new Set<string>()
    v.determinations.forEach((d, index) => {
      if (seen.has(d.methodId))
        context.addIssue({
          code: 'custom',
          path: ['determinations', index, 'methodId'],
          message: 'This determination is listed twice.',
        })
      seen.add(d.methodId)
    })
  })

export const listSamples = defineEndpoint({
  name: 'listSamples',
  summary: 'Samples, newest first',
  method: 'GET',
  path: '/samples',
  permission: 'samples.read',
  query: pageQuery.extend({
    state: sampleState.optional(),
    clientId: id.optional(),
    pointId: id.optional(),
    number: z.string().max(20).optional(),
  }),
  response: pageOf(sampleRow),
})
export const getSample = defineEndpoint({
  name: 'getSample',
  summary: 'One sample',
  method: 'GET',
  path: '/samples/:id',
  permission: 'samples.read',
  params: idParams,
  response: sampleView,
})
export const receiveSample = defineEndpoint({
  name: 'receiveSample',
  summary: 'Receive a sample',
  method: 'POST',
  path: '/samples',
  permission: 'samples.receive',
  body: receiveBody,
  response: sampleView,
})
export const decideAcceptance = defineEndpoint({
  name: 'decideAcceptance',
  summary: 'Accept, accept with a qualification, or reject a received sample',
  method: 'POST',
  path: '/samples/:id/acceptance',
  permission: 'samples.receive',
  params: idParams,
  body: z
    .object({
      version,
      verdict: z.enum(['accepted', 'accepted-with-qualification', 'rejected']),
      reason: note,
      clientConsent: note,
    })
    .superRefine((v, context) => {
      if (v.verdict !== 'accepted' && v.reason.trim().length < LIMITS.reasonMinimum) {
        context.addIssue({
          code: 'custom',
          path: ['reason'],
          message: 'Say why; it is printed with the results.',
        })
      }
    }),
  response: sampleView,
})
export const correctSample = defineEndpoint({
  name: 'correctSample',
  summary: 'Correct what was recorded at receipt; needs a reason',
  method: 'PUT',
  path: '/samples/:id',
  permission: 'samples.receive',
  params: idParams,
  body: z.object({
    version,
    reason,
    collectedAt: instant,
    collectedBy: name,
    preservation,
    ph: receiveBody.shape.ph,
    temperatureC: receiveBody.shape.temperatureC,
    container,
    filteredInField: z.boolean(),
    condition: note,
    remarks: note,
  }),
  response: sampleView,
})
export const addDetermination = defineEndpoint({
  name: 'addDetermination',
  summary: 'Ask for one more determination',
  method: 'POST',
  path: '/samples/:id/determinations',
  permission: 'samples.receive',
  params: idParams,
  body: z.object({ version, methodId: id }),
  response: sampleView,
})
export const withdrawDetermination = defineEndpoint({
  name: 'withdrawDetermination',
  summary: 'Withdraw a determination not yet released',
  method: 'POST',
  path: '/determinations/:id/withdraw',
  permission: 'samples.receive',
  params: idParams,
  body: versionedReason,
  response: sampleView,
})
export const waitingDetermination = z.object({
  id,
  sampleId: id,
  sampleNumber: z.string(),
  clientName: z.string(),
  pointCode: z.string(),
  pointName: z.string(),
  methodId: id,
  methodTitle: z.string(),
  collectedAt: instant,
  receivedAt: instant,
  holding: holdingTime,
  sampleState,
})
export const listWaiting = defineEndpoint({
  name: 'listWaiting',
  summary: 'Determinations waiting for a batch, shortest holding time first',
  method: 'GET',
  path: '/determinations/waiting',
  permission: 'samples.read',
  query: z.object({ methodId: id.optional() }),
  response: z.object({
    items: z.array(waitingDetermination),
    counts: z.array(z.object({ methodId: id, methodTitle: z.string(), waiting: z.number() })),
  }),
})

/* Manifest: a sheet of samples to receive, previewed before anything changes. */
export const manifestRow = z.object({
  row: z.number(),
  ok: z.boolean(),
  problems: z.array(z.object({ column: z.string(), message: z.string() })),
  values: z.record(z.string(), z.string()),
})
export const manifestPreview = z.object({
  uploadId: id,
  fileName: z.string(),
  sha256: z.string(),
  rows: z.array(manifestRow),
  good: z.number(),
  bad: z.number(),
})
export const previewManifest = defineEndpoint({
  name: 'previewManifest',
  summary: 'Read a manifest (xlsx or csv) and say what it would receive',
  method: 'POST',
  path: '/samples/manifests',
  permission: 'samples.receive',
  upload: true,
  response: manifestPreview,
})
export const applyManifest = defineEndpoint({
  name: 'applyManifest',
  summary: 'Receive every row of a previewed manifest; all or none',
  method: 'POST',
  path: '/samples/manifests/:id/apply',
  permission: 'samples.receive',
  params: idParams,
  response: z.object({ samples: z.array(z.object({ id, number: z.string() })) }),
})
export const sampleEndpoints = [
  listSamples,
  getSample,
  receiveSample,
  decideAcceptance,
  correctSample,
  addDetermination,
  withdrawDetermination,
  listWaiting,
  previewManifest,
  applyManifest,
]
