import type { Actor } from '@weirlight/shared/permissions'
import { defineEvent } from '../../platform/index.js'

/** Said inside the transaction that releases: alerts follow from it or nothing happens. */
export const batchReleased = defineEvent<{
  batchId: string
  resultIds: string[]
  actor: Actor
}>('batch.released')

/** Said in the same transaction of samples in which nothing is left to measure: their certificates follow. */
export const samplesReported = defineEvent<{ sampleIds: string[]; actor: Actor }>('samples.reported')
