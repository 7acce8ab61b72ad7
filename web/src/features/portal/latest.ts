import type { ResultRow } from '../results'

/** The newest result of each determination, by its name; rows come in any order. */
export function latestOfEach(rows: readonly ResultRow[]): ResultRow[] {
  const latest = new Map<string, ResultRow>()
  for (const row of rows) {
    const key = `${row.pointId} ${row.analyte} ${row.form}`
    const known = latest.get(key)
    if (!known || Date.parse(row.collectedAt) > Date.parse(known.collectedAt)) latest.set(key, row)
  }
  return [...latest.values()]
}
