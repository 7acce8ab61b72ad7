import { z } from 'zod'
import { id, idParams, instant, person } from './common.js'
import { defineEndpoint } from './endpoint.js'

export const controlKind = z.enum(['verification', 'control', 'method-blank', 'duplicate', 'slope'])
export const getControlChart = defineEndpoint({
  name: 'getControlChart',
  summary: 'Quality-control values over time with limits and signals',
  method: 'GET',
  path: '/charts/control',
  permission: 'charts.read',
  query: z.object({ methodId: id, kind: controlKind }),
  response: z.object({
    title: z.string(),
    unit: z.string(),
    center: z.number().nullable(),
    upperAction: z.number().nullable(),
    lowerAction: z.number().nullable(),
    upperWarning: z.number().nullable(),
    lowerWarning: z.number().nullable(),
    points: z.array(
      z.object({
        at: instant,
        value: z.number(),
        batchId: id.nullable(),
        label: z.string(),
        signals: z.array(z.string()),
      }),
    ),
  }),
})
export const validationRun = z.object({
  id,
  at: instant,
  by: person,
  engineVersion: z.string(),
  cases: z.number(),
  passed: z.number(),
  failed: z.number(),
  sha256: z.string(),
  rendered: z.boolean(),
})
export const listValidationRuns = defineEndpoint({
  name: 'listValidationRuns',
  summary: 'Validation reports kept',
  method: 'GET',
  path: '/validation-runs',
  permission: 'validation.read',
  response: z.object({ items: z.array(validationRun) }),
})
export const runValidation = defineEndpoint({
  name: 'runValidation',
  summary: 'Run every published case through the calculations and keep the report',
  method: 'POST',
  path: '/validation-runs',
  permission: 'validation.run',
  response: validationRun,
})
export const validationPdf = defineEndpoint({
  name: 'validationPdf',
  summary: 'A kept validation report',
  method: 'GET',
  path: '/validation-runs/:id/report.pdf',
  permission: 'validation.read',
  params: idParams,
  file: ['application/pdf'],
})
export const validationJson = defineEndpoint({
  name: 'validationJson',
  summary: 'A kept validation report as data',
  method: 'GET',
  path: '/validation-runs/:id/report.json',
  permission: 'validation.read',
  params: idParams,
  file: ['application/json'],
})
export const qualityEndpoints = [
  getControlChart,
  listValidationRuns,
  runValidation,
  validationPdf,
  validationJson,
]
