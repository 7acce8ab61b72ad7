import type { Actor } from '@weirlight/shared/permissions'
import { defineEvent } from '../../platform/index.js'

/** Said inside the transaction that releases: alerts and certificates follow from it or nothing happens. */
export const batchReleased = defineEvent<{
  batchId: string
  resultIds: string[]
  sampleIds: string[]
  actor: Actor
}>('batch.released')
