import type { BatchFinding, BatchView, PositionView } from '../batches'

export interface Check {
  what: string
  found: string
  outcome: 'pass' | 'fail' | 'warn' | 'not-judged'
}

const KINDS: [kinds: PositionView['kind'][], what: string][] = [
  [['blank'], 'Verification blanks'],
  [['verification'], 'Verification standards'],
  [['method-blank'], 'Method blank'],
  [['control'], 'Control sample'],
  [['duplicate'], 'Duplicate'],
  [['spike'], 'Spike'],
]

const of = (findings: readonly BatchFinding[], ...codes: string[]) =>
  findings.filter((finding) => codes.some((code) => finding.id.startsWith(`${code}-`)))

function count(n: number, one: string, many: string, none: string): string {
  if (n === 0) return none
  return n === 1 ? `1 ${one}` : `${n} ${many}`
}

/** What a reviewer would tick off, ticked where the record decides it. Judges nothing anew: it counts what the server found. */
export function reviewChecks(batch: BatchView): Check[] {
  const { rows, findingsList: findings } = batch
  const cells = rows.length * batch.replicates
  const read = rows.reduce((sum, row) => sum + row.readings.length, 0)
  const holding = of(findings, 'holding').length
  const window = of(findings, 'early', 'late').length
  const range = of(findings, 'range').length
  const spread = of(findings, 'spread').length
  const checks: Check[] = [
    {
      what: 'Every cell read',
      found: `${read} of ${cells}`,
      outcome: read >= cells ? 'pass' : 'fail',
    },
    ...KINDS.flatMap(([kinds, what]) => controlCheck(rows, kinds, what)),
    {
      what: 'Holding times kept',
      found: count(holding, 'run out', 'run out', 'all'),
      outcome: holding === 0 ? 'pass' : 'fail',
    },
    {
      what: 'Inside the curve',
      found: count(range, 'above it', 'above it', 'all'),
      outcome: range === 0 ? 'pass' : 'fail',
    },
    {
      what: 'Read in the colour window',
      found: !batch.colourStartedAt
        ? 'start not recorded'
        : count(window, 'position outside', 'positions outside', 'all'),
      outcome: !batch.colourStartedAt ? 'not-judged' : window === 0 ? 'pass' : 'warn',
    },
    {
      what: 'Readings of a position agree',
      found: count(spread, 'apart', 'apart', 'all'),
      outcome: spread === 0 ? 'pass' : 'warn',
    },
  ]
  return checks
}

function controlCheck(rows: readonly PositionView[], kinds: PositionView['kind'][], what: string): Check[] {
  const found = rows.filter((row) => kinds.includes(row.kind))
  // a spike is made where it is asked for
  if (found.length === 0) return kinds.includes('spike') ? [] : [{ what, found: 'missing', outcome: 'fail' }]
  const failed = found.some((row) => row.assessment.qcPassed === false)
  const isJudged = found.every((row) => row.assessment.qcPassed !== null)
  return [
    {
      what,
      found: [...new Set(found.map((row) => row.assessment.qcText ?? 'not read'))].join(', '),
      outcome: failed ? 'fail' : isJudged ? 'pass' : 'not-judged',
    },
  ]
}
