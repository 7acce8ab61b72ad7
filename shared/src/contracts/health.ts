import { z } from 'zod'
import { defineEndpoint } from './endpoint.js'

const part = z.enum(['ok', 'failing'])
export const getHealth = defineEndpoint({
  name: 'getHealth',
  summary: 'Whether the database, the job queue and the mail server answer',
  method: 'GET',
  path: '/health',
  permission: 'public',
  response: z.object({ status: part, database: part, jobs: part, mail: part }),
})
export const healthEndpoints = [getHealth]
