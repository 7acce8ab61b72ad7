/** What a series of equal pieces of work came to. */
export interface Measured {
  name: string
  atATime: number
  requests: number
  perSecond: number
  /** milliseconds */
  p50: number
  p95: number
  p99: number
  /** of the database, for one piece of work */
  statements: number | null
}

/** The smallest time that at least this share of all times does not exceed (nearest rank). */
export function percentile(sortedTimes: readonly number[], share: number): number {
  const rank = Math.max(1, Math.ceil(share * sortedTimes.length))
  return sortedTimes[rank - 1] ?? Number.NaN
}

export function measuredOf(
  times: readonly number[],
  facts: { name: string; atATime: number; tookMs: number; statements?: number | undefined },
): Measured {
  const sorted = [...times].sort((a, b) => a - b)
  return {
    name: facts.name,
    atATime: facts.atATime,
    requests: times.length,
    perSecond: times.length / (facts.tookMs / 1000),
    p50: percentile(sorted, 0.5),
    p95: percentile(sorted, 0.95),
    p99: percentile(sorted, 0.99),
    statements: facts.statements ?? null,
  }
}
