import { z } from 'zod'
import { analyteCode, day, form, id, idParams, instant, pageOf, pageQuery, verdict } from './common.js'
import { defineEndpoint } from './endpoint.js'

export const resultState = z.enum(['measured', 'reviewed', 'released', 'not-reported'])
export const resultRow = z.object({
  id,
  state: resultState,
  sampleId: id,
  sampleNumber: z.string(),
  clientId: id,
  clientName: z.string(),
  pointId: id,
  pointCode: z.string(),
  pointName: z.string(),
  analyte: analyteCode,
  form,
  methodId: id,
  methodTitle: z.string(),
  batchId: id,
  batchNumber: z.string(),
  collectedAt: instant,
  measuredAt: instant,
  releasedAt: instant.nullable(),
  /** as reported, e.g. `3.9` or `<0.010` */
  text: z.string(),
  unit: z.enum(['mg/L', 'ug/L']),
  /** unrounded, mg/L */
  concentration: z.number(),
  expandedUncertainty: z.number().nullable(),
  uncertaintyText: z.string().nullable(),
  verdict: verdict.nullable(),
  limitName: z.string().nullable(),
  limitValue: z.string().nullable(),
  limitUnit: z.string().nullable(),
  flags: z.array(z.string()),
})
export type ResultRow = z.infer<typeof resultRow>

const filter = {
  clientId: id.optional(),
  pointId: id.optional(),
  methodId: id.optional(),
  analyte: analyteCode.optional(),
  verdict: z.enum(['above', 'below']).optional(),
  state: resultState.optional(),
  from: day.optional(),
  to: day.optional(),
  sample: z.string().max(20).optional(),
}
export const listResults = defineEndpoint({
  name: 'listResults',
  summary: 'Results, newest first',
  method: 'GET',
  path: '/results',
  permission: 'results.read',
  query: pageQuery.extend(filter),
  response: pageOf(resultRow),
})
export const resultTrend = defineEndpoint({
  name: 'resultTrend',
  summary: 'Released results of one point and analyte by time of collection',
  method: 'GET',
  path: '/results/trend',
  permission: 'results.read',
  query: z.object({ pointId: id, analyte: analyteCode, form: form.optional() }),
  response: z.object({
    unit: z.enum(['mg/L', 'ug/L']),
    limit: z.object({ name: z.string(), value: z.number(), text: z.string() }).nullable(),
    points: z.array(
      z.object({
        resultId: id,
        at: instant,
        value: z.number(),
        text: z.string(),
        verdict: verdict.nullable(),
        nonDetect: z.boolean(),
      }),
    ),
  }),
})
export const exportResults = defineEndpoint({
  name: 'exportResults',
  summary: 'The filtered results as a workbook or CSV',
  method: 'GET',
  path: '/results/export',
  permission: 'results.export',
  query: z.object({ ...filter, format: z.enum(['xlsx', 'csv']) }),
  file: ['application/vnd.openxmlformats-officedocument.spreadsheetml.sheet', 'text/csv'],
})

/** A number's story: the same for every reported number anywhere. */
const storyLine = z.object({
  heading: z.string(),
  main: z.string(),
  detail: z.string(),
  to: z.string().nullable(),
})
export const storyView = z.object({
  result: resultRow,
  certificate: z.object({ id, number: z.string(), state: z.string() }).nullable(),
  lines: z.array(storyLine),
  stored: z.number(),
  recomputed: z.number(),
  same: z.boolean(),
  engineVersion: z.string(),
  tint: z
    .object({
      absorbance: z.number(),
      band: z.object({ peakNm: z.number(), widthShortNm: z.number(), widthLongNm: z.number() }),
    })
    .nullable(),
  readings: z.array(
    z.object({
      id,
      replicate: z.number(),
      absorbance: z.string(),
      at: instant,
      by: z.string(),
      source: z.string(),
      superseded: z.boolean(),
      reason: z.string(),
    }),
  ),
  calibration: z.object({
    id,
    number: z.string(),
    equation: z.string(),
    signedBy: z.string(),
    signedAt: instant.nullable(),
  }),
  standards: z.array(
    z.object({
      position: z.number(),
      concentration: z.string(),
      absorbances: z.array(z.string()),
      lotId: id.nullable(),
      lotNumber: z.string().nullable(),
    }),
  ),
  lots: z.array(z.object({ id, number: z.string(), name: z.string(), role: z.string(), detail: z.string() })),
  /** what was changed by hand between the reading and the release */
  changes: z.array(
    z.object({
      what: z.string(),
      from: z.string(),
      to: z.string(),
      by: z.string(),
      at: instant,
      reason: z.string(),
    }),
  ),
  caution: z.string(),
})
export type StoryView = z.infer<typeof storyView>
export const getStory = defineEndpoint({
  name: 'getStory',
  summary: 'Everything behind one result, with the value recomputed',
  method: 'GET',
  path: '/results/:id/story',
  permission: 'story.read',
  params: idParams,
  response: storyView,
})
export const resultEndpoints = [listResults, resultTrend, exportResults, getStory]
