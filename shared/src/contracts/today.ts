import { z } from 'zod'
import { id, instant } from './common.js'
import { defineEndpoint } from './endpoint.js'

export const todayLine = z.object({
  key: z.string(),
  kind: z.enum([
    'review',
    'holding',
    'calibration',
    'alert',
    'expiry',
    'check',
    'mail',
    'certificate',
    'batch',
    'person',
    'result',
    'set-up',
  ]),
  /** the moment its clock runs to or since; the page says it in words */
  clock: z.object({ at: instant.nullable(), sense: z.enum(['due', 'since', 'none']), prefix: z.string() }),
  tone: z.enum(['above', 'caution', 'quiet']),
  title: z.string(),
  detail: z.string(),
  action: z.string(),
  to: z.string(),
})
export const getToday = defineEndpoint({
  name: 'getToday',
  summary: 'What needs this person, by the clock that runs out first',
  method: 'GET',
  path: '/today',
  permission: 'today.read',
  response: z.object({
    now: instant,
    lines: z.array(todayLine),
    facts: z.array(z.object({ heading: z.string(), text: z.string() })),
    counts: z.object({
      receiving: z.number(),
      review: z.number(),
      alerts: z.number(),
      calibrations: z.number(),
      batches: z.number(),
    }),
  }),
})
export const goTo = defineEndpoint({
  name: 'goTo',
  summary: 'Where a number leads: sample, batch, calibration, certificate, alert, lot',
  method: 'GET',
  path: '/go',
  permission: 'search.go',
  query: z.object({ number: z.string().trim().min(1).max(30) }),
  response: z.object({
    hits: z.array(z.object({ kind: z.string(), id, number: z.string(), detail: z.string(), to: z.string() })),
  }),
})
export const todayEndpoints = [getToday, goTo]
