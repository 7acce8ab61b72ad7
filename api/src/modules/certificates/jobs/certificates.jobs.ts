import { z } from 'zod'
import { defineJob, noData } from '../../../platform/index.js'

export const renderCertificate = defineJob({
  name: 'certificate.render',
  data: z.object({ id: z.string() }),
  concurrency: 2,
})
/** finds certificates whose document should exist by now */
export const sweepCertificates = defineJob({
  name: 'certificate.sweep',
  data: noData,
  retryLimit: 0,
  schedule: '*/2 * * * *',
  runsAtStart: true,
})
