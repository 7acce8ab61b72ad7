import type { PositionKind } from './batch-rows.js'

export interface LaidPosition {
  kind: PositionKind
  /** of a sample */
  determinationId: string | null
  /** the sample that a duplicate or spike belongs to */
  ofDeterminationId: string | null
}

const control = (kind: PositionKind): LaidPosition => ({
  kind,
  determinationId: null,
  ofDeterminationId: null,
})

/**
 * The order of a run: blank and verification first; for every started group (20 samples, TNI preparation batch, from
 * memory) a method blank, a control sample, the samples, a duplicate, and the spike where one is asked for; a
 * verification and its blank after every tenth sample and at the end (Standard Methods 4020, from memory). Pure.
 */
export function layRun(run: {
  determinationIds: readonly string[]
  duplicateOf: string | null
  spikeOf: string | null
  verificationEvery: number
  groupSize: number
}): LaidPosition[] {
  const laid: LaidPosition[] = [control('blank'), control('verification')]
  let sinceVerification = 0
  for (let start = 0; start < run.determinationIds.length; start += run.groupSize) {
    const group = run.determinationIds.slice(start, start + run.groupSize)
    laid.push(control('method-blank'), control('control'))
    group.forEach((determinationId, index) => {
      if (sinceVerification === run.verificationEvery) {
        laid.push(control('verification'), control('blank'))
        sinceVerification = 0
      }
      laid.push({ kind: 'sample', determinationId, ofDeterminationId: null })
      sinceVerification += 1
      if (index < group.length - 1) return
      const twice = group.find((one) => one === run.duplicateOf) ?? group[0] ?? determinationId
      laid.push({ ...control('duplicate'), ofDeterminationId: twice })
      if (group.some((one) => one === run.spikeOf))
        laid.push({ ...control('spike'), ofDeterminationId: run.spikeOf })
    })
  }
  return [...laid, control('verification'), control('blank')]
}
