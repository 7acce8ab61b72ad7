import { z } from 'zod'
import { id, idParams, instant, pageOf, pageQuery } from './common.js'
import { defineEndpoint } from './endpoint.js'

export const mailRow = z.object({
  id,
  to: z.string(),
  subject: z.string(),
  state: z.enum(['waiting', 'sending', 'sent', 'failed']),
  attempts: z.number(),
  lastError: z.string(),
  createdAt: instant,
  sentAt: instant.nullable(),
  aboutKind: z.string(),
  aboutId: z.string(),
  nextTryAt: instant.nullable(),
})
export const listMail = defineEndpoint({
  name: 'listMail',
  summary: 'Messages that left or should leave',
  method: 'GET',
  path: '/mail',
  permission: 'mail.read',
  query: pageQuery.extend({ state: mailRow.shape.state.optional() }),
  response: pageOf(mailRow),
})
export const retryMail = defineEndpoint({
  name: 'retryMail',
  summary: 'Try a failed message again now',
  method: 'POST',
  path: '/mail/:id/retry',
  permission: 'mail.retry',
  params: idParams,
  response: mailRow,
})
export const mailEndpoints = [listMail, retryMail]
