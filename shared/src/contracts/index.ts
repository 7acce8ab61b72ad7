import { alertEndpoints } from './alerts.js'
import { batchEndpoints } from './batches.js'
import { benchEndpoints } from './bench.js'
import { calibrationEndpoints } from './calibrations.js'
import { certificateEndpoints } from './certificates.js'
import { clientEndpoints } from './clients.js'
import type { Endpoint } from './endpoint.js'
import { healthEndpoints } from './health.js'
import { historyEndpoints } from './history.js'
import { laboratoryEndpoints } from './laboratory.js'
import { mailEndpoints } from './mail.js'
import { portalEndpoints } from './portal.js'
import { qualityEndpoints } from './quality.js'
import { resultEndpoints } from './results.js'
import { sampleEndpoints } from './samples.js'
import { secondFactorEndpoints } from './second-factor.js'
import { sessionEndpoints } from './session.js'
import { todayEndpoints } from './today.js'
import { userEndpoints } from './users.js'

export * from './alerts.js'
export * from './assessment.js'
export * from './batches.js'
export * from './bench.js'
export * from './calibrations.js'
export * from './certificates.js'
export * from './clients.js'
export * from './common.js'
export * from './endpoint.js'
export * from './health.js'
export * from './history.js'
export * from './laboratory.js'
export * from './mail.js'
export * from './portal.js'
export * from './quality.js'
export type * from './reference.js'
export * from './reference.js'
export * from './results.js'
export * from './samples.js'
export * from './second-factor.js'
export * from './session.js'
export * from './today.js'
export * from './users.js'

/** Every endpoint there is: the server refuses to start when a route is missing or extra. */
export const endpoints: readonly Endpoint[] = [
  ...healthEndpoints,
  ...sessionEndpoints,
  ...secondFactorEndpoints,
  ...userEndpoints,
  ...laboratoryEndpoints,
  ...clientEndpoints,
  ...benchEndpoints,
  ...sampleEndpoints,
  ...calibrationEndpoints,
  ...batchEndpoints,
  ...resultEndpoints,
  ...alertEndpoints,
  ...certificateEndpoints,
  ...portalEndpoints,
  ...historyEndpoints,
  ...mailEndpoints,
  ...todayEndpoints,
  ...qualityEndpoints,
]
