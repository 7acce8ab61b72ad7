import { z } from 'zod'
import { day, id, instant, pageOf, pageQuery } from './common.js'
import { defineEndpoint } from './endpoint.js'

export const historyRow = z.object({
  id: z.string(),
  at: instant,
  actorId: id.nullable(),
  actorName: z.string(),
  actorRole: z.string(),
  action: z.string(),
  reason: z.string(),
  requestId: z.string(),
  /** the table, e.g. `samples`; its row; the number people know it by */
  thing: z.string(),
  thingId: z.string(),
  thingNumber: z.string(),
  operation: z.enum(['insert', 'update', 'delete']),
  old: z.record(z.string(), z.unknown()).nullable(),
  new: z.record(z.string(), z.unknown()).nullable(),
})
export type HistoryRow = z.infer<typeof historyRow>
const filter = {
  actorId: id.optional(),
  thing: z.string().max(60).optional(),
  thingId: z.string().max(30).optional(),
  number: z.string().max(30).optional(),
  action: z.string().max(60).optional(),
  from: day.optional(),
  to: day.optional(),
}
export const listHistory = defineEndpoint({
  name: 'listHistory',
  summary: 'Every change, newest first',
  method: 'GET',
  path: '/history',
  permission: 'history.read',
  query: pageQuery.extend(filter),
  response: pageOf(historyRow),
})
export const historyFilters = defineEndpoint({
  name: 'historyFilters',
  summary: 'People, things and actions to filter by',
  method: 'GET',
  path: '/history/filters',
  permission: 'history.read',
  response: z.object({
    people: z.array(z.object({ id, name: z.string() })),
    things: z.array(z.string()),
    actions: z.array(z.string()),
  }),
})
export const exportHistory = defineEndpoint({
  name: 'exportHistory',
  summary: 'The filtered history as CSV',
  method: 'GET',
  path: '/history/export.csv',
  permission: 'history.read',
  query: z.object(filter),
  file: ['text/csv'],
})
export const sealView = z.object({
  id: z.string(),
  firstEntry: z.string(),
  lastEntry: z.string(),
  entries: z.number(),
  root: z.string(),
  previousHead: z.string().nullable(),
  head: z.string(),
  sealedAt: instant,
})
export const listSeals = defineEndpoint({
  name: 'listSeals',
  summary: 'The seals over the history, newest first',
  method: 'GET',
  path: '/history/seals',
  permission: 'history.read',
  query: pageQuery,
  response: pageOf(sealView),
})
export const verifySeals = defineEndpoint({
  name: 'verifySeals',
  summary: 'Recompute the latest seals from the entries and compare',
  method: 'GET',
  path: '/history/seals/check',
  permission: 'history.read',
  response: z.object({
    checked: z.number(),
    entries: z.number(),
    ok: z.boolean(),
    brokenAt: z.string().nullable(),
    head: z.string().nullable(),
  }),
})
export const historyEndpoints = [listHistory, historyFilters, exportHistory, listSeals, verifySeals]
