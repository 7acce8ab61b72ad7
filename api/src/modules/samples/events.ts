import type { Actor } from '@weirlight/shared/permissions'
import { defineEvent } from '../../platform/index.js'

/** Said inside the transaction that withdraws a determination: it may have been the last one its sample waited for. */
export const determinationWithdrawn = defineEvent<{ sampleId: string; actor: Actor }>(
  'determination.withdrawn',
)
