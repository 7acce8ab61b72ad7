import type { BatchView } from '@weirlight/shared/contracts'

type Kind = BatchView['rows'][number]['kind']

/** The first row of its kind, or the one counted from there. */
export function rowOf(batch: BatchView, kind: Kind, nth = 0): BatchView['rows'][number] {
  const row = batch.rows.filter((one) => one.kind === kind)[nth]
  if (!row) throw new Error(`no ${kind}`)
  return row
}

/** What the run sheet sends for one cell: that of the first sample, position 5, when no other is named. */
export function cell(
  batch: BatchView,
  absorbance: string,
  changes: { replicate?: number; position?: number; reason?: string } = {},
) {
  const row = batch.rows[(changes.position ?? 5) - 1]
  const replicate = changes.replicate ?? 1
  const now = row?.readings.find((one) => one.replicate === replicate)
  return {
    positionId: row?.id ?? '',
    replicate,
    absorbance,
    supersedes: now?.id ?? null,
    ...(changes.reason === undefined ? {} : { reason: changes.reason }),
  }
}
