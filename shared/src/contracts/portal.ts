import { z } from 'zod'
import { alertView } from './alerts.js'
import { analyteCode, day, id, pageOf, pageQuery } from './common.js'
import { contactView, samplingPointView } from './clients.js'
import { defineEndpoint } from './endpoint.js'
import { resultRow, resultTrend } from './results.js'

/** The client's own page: its points, results, alerts, contacts; nothing of anyone else. Certificates and alerts come from their own routes. */
export const portalNow = defineEndpoint({
  name: 'portalNow',
  summary: 'Unanswered alerts with their trend, and the latest results',
  method: 'GET',
  path: '/portal/now',
  permission: 'portal.read',
  response: z.object({
    clientName: z.string(),
    laboratoryName: z.string(),
    laboratoryPhone: z.string(),
    alerts: z.array(alertView.extend({ trend: resultTrend.response, certificateId: id.nullable() })),
    recent: z.array(resultRow),
  }),
})
export const portalResults = defineEndpoint({
  name: 'portalResults',
  summary: 'Our released results',
  method: 'GET',
  path: '/portal/results',
  permission: 'portal.read',
  query: pageQuery.extend({
    pointId: id.optional(),
    analyte: analyteCode.optional(),
    from: day.optional(),
    to: day.optional(),
  }),
  response: pageOf(resultRow),
})
export const portalTrend = defineEndpoint({
  name: 'portalTrend',
  summary: 'Trend of one of our points',
  method: 'GET',
  path: '/portal/trend',
  permission: 'portal.read',
  query: resultTrend.query,
  response: resultTrend.response,
})
export const portalUtility = defineEndpoint({
  name: 'portalUtility',
  summary: 'Our points and contacts',
  method: 'GET',
  path: '/portal/utility',
  permission: 'portal.read',
  response: z.object({
    name: z.string(),
    systemId: z.string(),
    address: z.string(),
    programmeName: z.string(),
    points: z.array(samplingPointView),
    contacts: z.array(contactView),
  }),
})
export const portalEndpoints = [portalNow, portalResults, portalTrend, portalUtility]
