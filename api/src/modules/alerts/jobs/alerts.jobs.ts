import { defineJob, noData } from '../../../platform/index.js'

/** says of alerts whose mail has left that they are notified, where the process died in between */
export const sweepAlerts = defineJob({
  name: 'alert.sweep',
  data: noData,
  retryLimit: 0,
  schedule: '*/5 * * * *',
  runsAtStart: true,
})
