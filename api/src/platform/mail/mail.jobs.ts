import { z } from 'zod'
import { defineJob, noData } from '../jobs/job.js'

export const sendMail = defineJob({
  name: 'mail.send',
  data: z.object({ id: z.string() }),
  concurrency: 3,
})

/** every minute, and when a worker starts: whatever should have left and has no job any more */
export const sweepMail = defineJob({
  name: 'mail.sweep',
  data: noData,
  retryLimit: 0,
  schedule: '* * * * *',
  runsAtStart: true,
})
