import { z } from 'zod'
import {
  analyteCode,
  form,
  id,
  idParams,
  instant,
  note,
  pageOf,
  pageQuery,
  person,
  version,
  versionedReason,
} from './common.js'
import { defineEndpoint } from './endpoint.js'

export const alertState = z.enum(['raised', 'notified', 'acknowledged', 'closed', 'cancelled'])
export const alertRow = z.object({
  id,
  number: z.string(),
  state: alertState,
  clientId: id,
  clientName: z.string(),
  sampleId: id,
  sampleNumber: z.string(),
  pointName: z.string(),
  analyte: analyteCode,
  form,
  text: z.string(),
  unit: z.string(),
  limitName: z.string(),
  limitValue: z.string(),
  limitUnit: z.string(),
  raisedAt: instant,
  notifiedAt: instant.nullable(),
  acknowledgedAt: instant.nullable(),
  resultId: id,
  /** when somebody of the client should have answered */
  answerDueAt: instant.nullable(),
  version,
})
export const delivery = z.object({
  mailId: id,
  to: z.string(),
  state: z.enum(['waiting', 'sending', 'sent', 'failed']),
  attempts: z.number(),
  sentAt: instant.nullable(),
  lastError: z.string(),
})
export const alertView = alertRow.extend({
  uncertaintyText: z.string().nullable(),
  limitKind: z.string(),
  limitSource: z.string(),
  decisionRule: z.string(),
  collectedAt: instant,
  releasedAt: instant,
  acknowledgedBy: person.nullable(),
  acknowledgement: z.string(),
  closedBy: person.nullable(),
  closedAt: instant.nullable(),
  closingNote: z.string(),
  deliveries: z.array(delivery),
  /** what laws ask for, as data with its source; the product says, the agency decides */
  clocks: z.array(
    z.object({ duty: z.string(), jurisdiction: z.string(), dueAt: instant.nullable(), source: z.string() }),
  ),
  agencyName: z.string(),
  agencyPhone: z.string(),
  earlier: z.array(z.object({ at: instant, text: z.string(), verdict: z.string().nullable() })),
  caution: z.string(),
})
export type AlertView = z.infer<typeof alertView>
export const listAlerts = defineEndpoint({
  name: 'listAlerts',
  summary: 'Alerts, newest first; a client sees its own',
  method: 'GET',
  path: '/alerts',
  permission: 'alerts.read',
  query: pageQuery.extend({ state: alertState.optional(), clientId: id.optional() }),
  response: pageOf(alertRow),
})
export const getAlert = defineEndpoint({
  name: 'getAlert',
  summary: 'One alert',
  method: 'GET',
  path: '/alerts/:id',
  permission: 'alerts.read',
  params: idParams,
  response: alertView,
})
export const acknowledgeAlert = defineEndpoint({
  name: 'acknowledgeAlert',
  summary: 'The client says it has seen the alert',
  method: 'POST',
  path: '/alerts/:id/acknowledge',
  permission: 'alerts.acknowledge',
  params: idParams,
  body: z.object({ version, note }),
  response: alertView,
})
export const closeAlert = defineEndpoint({
  name: 'closeAlert',
  summary: 'Close an answered alert',
  method: 'POST',
  path: '/alerts/:id/close',
  permission: 'alerts.manage',
  params: idParams,
  body: versionedReason,
  response: alertView,
})
export const cancelAlert = defineEndpoint({
  name: 'cancelAlert',
  summary: 'Cancel an alert raised in error; everybody told is told again',
  method: 'POST',
  path: '/alerts/:id/cancel',
  permission: 'alerts.manage',
  params: idParams,
  body: versionedReason,
  response: alertView,
})
export const alertEndpoints = [listAlerts, getAlert, acknowledgeAlert, closeAlert, cancelAlert]
