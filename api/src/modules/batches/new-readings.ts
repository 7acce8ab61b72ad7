import type { FieldProblem } from '@weirlight/shared/errors'
import { ProblemError, invalidInput } from '../../platform/index.js'
import type { NewReading, PositionReadingRow, PositionRow } from './batch-rows.js'

export interface Entry {
  positionId: string
  replicate: number
  absorbance: string
  reason?: string | undefined
  /** the reading the person saw in the cell; null for an empty one */
  supersedes: string | null
}

export const cellKey = (positionId: string, replicate: number) => `${positionId}:${replicate}`

/**
 * What of the entries is to be written. Each says which reading the person saw in its cell, so that nobody overwrites
 * what they have not seen; an entry that stands there already, because the answer to it was lost on the way, is left
 * out. One bad entry and nothing is written. Pure.
 * @throws invalid-input, stale: with the entry's path and whose reading it is
 */
export function planReadings(input: {
  entries: readonly Entry[]
  positions: readonly PositionRow[]
  /** what counts, by cell */
  current: ReadonlyMap<string, PositionReadingRow>
  replicates: number
  actorId: string
  /** a spreadsheet knows 0.5 and 0.50 as one number */
  isFile: boolean
}): NewReading[] {
  const { entries, current } = input
  const known = new Map(input.positions.map((row) => [row.id, row]))
  const seen = new Set<string>()
  const bad: FieldProblem[] = []
  const stale: { path: string; message: string; by: PositionReadingRow }[] = []
  const planned = entries.flatMap((entry, index): NewReading[] => {
    const path = `readings.${index}`
    const row = known.get(entry.positionId)
    const key = cellKey(entry.positionId, entry.replicate)
    const problem = whyNotCell({ row, entry, isTwice: seen.has(key), replicates: input.replicates })
    seen.add(key)
    if (problem) {
      bad.push({ path, message: problem })
      return []
    }
    const now = current.get(key)
    const isSame = now !== undefined && isSameNumber(now.absorbanceText, entry.absorbance, input.isFile)
    if (isSame && (now.id === entry.supersedes || now.readBy === input.actorId)) return []
    if ((now?.id ?? null) !== entry.supersedes) {
      const cell = `Position ${row?.position ?? ''}, reading ${entry.replicate}`
      if (now)
        stale.push({
          path,
          message: `${cell}: ${now.readByName} entered ${now.absorbanceText} there meanwhile.`,
          by: now,
        })
      else bad.push({ path, message: `${cell}: there is no reading to correct.` })
      return []
    }
    if (now && !entry.reason) {
      bad.push({ path: `${path}.reason`, message: 'Say in a few words why the reading is corrected.' })
      return []
    }
    const { positionId, replicate, absorbance, supersedes } = entry
    return [
      {
        positionId,
        replicate,
        absorbance,
        supersedesId: supersedes,
        reason: now ? (entry.reason ?? '') : '',
      },
    ]
  })
  if (bad.length > 0) throw invalidInput(bad)
  const [first] = stale
  if (first) {
    throw new ProblemError(
      'stale',
      `${first.message} Nothing of yours was saved; look at it and save again.`,
      {
        errors: stale.map(({ path, message }) => ({ path, message })),
        conflict: { changedBy: first.by.readByName, changedAt: first.by.readAt.toISOString() },
      },
    )
  }
  return planned
}

function whyNotCell(given: {
  row: PositionRow | undefined
  entry: Entry
  isTwice: boolean
  replicates: number
}): string | undefined {
  if (!given.row) return 'There is no such position in this batch.'
  if (given.entry.replicate > given.replicates)
    return `Each position is read ${given.replicates === 1 ? 'once' : `${given.replicates} times`} in this batch.`
  return given.isTwice ? 'This cell is given twice.' : undefined
}

function isSameNumber(saved: string, entered: string, isFile: boolean): boolean {
  return saved === entered || (isFile && Number(saved) === Number(entered))
}
