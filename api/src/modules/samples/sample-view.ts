import type { sampleRow, sampleView, waitingDetermination } from '@weirlight/shared/contracts'
import type { z } from 'zod'
import { checkAcceptance } from './acceptance.js'
import { holdingAt, type HoldingView } from './holding.js'
import type { MethodRules } from './method-rules.js'
import type { DeterminationRow, SampleRow, SampleWhole, WaitingRow } from './sample-rows.js'

type SampleRowView = z.input<typeof sampleRow>
type SampleView = z.input<typeof sampleView>

const isUnmeasured = (state: string) => state === 'requested' || state === 'in-batch'

export function toRow(row: SampleRow, at: Date): SampleRowView {
  const { collectedAt, receivedAt, determinations, ...plain } = row
  const [first] = determinations
    .filter(({ state }) => isUnmeasured(state))
    .sort((a, b) => Date.parse(a.dueAt) - Date.parse(b.dueAt))
  return {
    ...plain,
    collectedAt: collectedAt.toISOString(),
    receivedAt: receivedAt?.toISOString() ?? null,
    determinations: determinations.map(({ analyte, form, state }) => ({ analyte, form, state })),
    holding: first
      ? holdingAt({
          collectedAt,
          dueAt: new Date(first.dueAt),
          ruleText: first.rule,
          soonWithinHours: first.soonWithinHours,
          at,
        })
      : null,
  }
}

/** A holding time stops when the sample is read: later it says how it stood then. */
function determinationHolding(row: DeterminationRow, collectedAt: Date, at: Date): HoldingView {
  return holdingAt({
    collectedAt,
    dueAt: row.holdingDueAt,
    ruleText: row.holdingRule,
    soonWithinHours: row.soonWithinHours,
    at: isUnmeasured(row.state) ? at : (row.lastReadAt ?? at),
  })
}

export function toView(input: {
  sample: SampleWhole
  details: readonly DeterminationRow[]
  methods: readonly MethodRules[]
  at: Date
}): SampleView {
  const { sample, details, methods, at } = input
  const receivedAt = sample.receivedAt ?? at
  const { checks, suggested } = checkAcceptance(
    { ...sample, receivedAt, methods },
    // before the decision time runs on; afterwards the checks stay as they were at receipt
    sample.state === 'received' || sample.state === 'expected' ? at : receivedAt,
  )
  const {
    clientActive: _c,
    pointActive: _p,
    programmeCode: _pr,
    receivedBy,
    receivedByName,
    ...rest
  } = sample
  return {
    ...rest,
    ...toRow(sample, at),
    receivedBy: receivedBy === null ? null : { id: receivedBy, name: receivedByName ?? '' },
    checks,
    suggested,
    details: details.map((row) => {
      const { holdingDueAt: _d, holdingRule: _r, soonWithinHours: _s, lastReadAt: _l, ...plain } = row
      return { ...plain, holding: determinationHolding(row, sample.collectedAt, at) }
    }),
  }
}

export function toWaiting(row: WaitingRow, at: Date): z.input<typeof waitingDetermination> {
  const { holdingDueAt, holdingRule, soonWithinHours, collectedAt, receivedAt, ...plain } = row
  return {
    ...plain,
    collectedAt: collectedAt.toISOString(),
    receivedAt: receivedAt.toISOString(),
    holding: holdingAt({ collectedAt, dueAt: holdingDueAt, ruleText: holdingRule, soonWithinHours, at }),
  }
}
