import type { CalibrationDraft, DraftStandard } from './calibration-draft'

const SET_UP = [
  'instrumentId',
  'cellPathCm',
  'model',
  'weighting',
  'stockLotId',
  'reagentLotIds',
  'colourStartedAt',
  'temperatureC',
  'note',
] as const
const ROW_FIELDS = ['role', 'concentration', 'lotId', 'leftOutReason'] as const

const same = (a: unknown, b: unknown) => JSON.stringify(a) === JSON.stringify(b)

/** mine where I changed it, theirs where I did not; both changed it differently: mine is kept and named */
function pick<T>(given: { base: T; mine: T; theirs: T; clash: () => void }): T {
  const { base, mine, theirs, clash } = given
  if (same(mine, base)) return theirs
  if (!same(theirs, base) && !same(theirs, mine)) clash()
  return mine
}

/**
 * Two people changed one draft from the same starting point. Nothing either of them entered is dropped: what only one
 * changed is taken, what both changed differently keeps mine and is named in `clashes`, for the person to look at.
 * Rows of the starting point go by their key; rows that both added stay both.
 */
export function mergeDrafts(given: {
  base: CalibrationDraft
  mine: CalibrationDraft
  theirs: CalibrationDraft
}): {
  draft: CalibrationDraft
  clashes: string[]
} {
  const { base, mine, theirs } = given
  const clashes: string[] = []
  const merged = { ...mine }
  for (const field of SET_UP) {
    Object.assign(merged, {
      [field]: pick<unknown>({
        base: base[field],
        mine: mine[field],
        theirs: theirs[field],
        clash: () => clashes.push(field),
      }),
    })
  }
  merged.standards = mergeRows({
    base: base.standards,
    mine: mine.standards,
    theirs: theirs.standards,
    clashes,
  })
  return { draft: merged, clashes }
}

function mergeRows(given: {
  base: readonly DraftStandard[]
  mine: readonly DraftStandard[]
  theirs: readonly DraftStandard[]
  clashes: string[]
}): DraftStandard[] {
  const { base, mine, theirs, clashes } = given
  const baseByKey = new Map(base.map((row) => [row.key, row]))
  const theirsByKey = new Map(theirs.map((row) => [row.key, row]))
  const mineKeys = new Set(mine.map((row) => row.key))
  const rows = mine.flatMap((row) => {
    const before = baseByKey.get(row.key)
    if (!before) return [row]
    const other = theirsByKey.get(row.key)
    // they took the row away: it goes, unless I have changed it since
    if (!other) return same(row, before) ? [] : [row]
    return [mergeRow({ before, row, other, clashes })]
  })
  const added = theirs.filter((row) => !baseByKey.has(row.key) && !mineKeys.has(row.key))
  return [...rows, ...added]
}

function mergeRow(given: {
  before: DraftStandard
  row: DraftStandard
  other: DraftStandard
  clashes: string[]
}): DraftStandard {
  const { before, row, other, clashes } = given
  const merged: DraftStandard = { ...row }
  for (const field of ROW_FIELDS) {
    Object.assign(merged, {
      [field]: pick<unknown>({
        base: before[field],
        mine: row[field],
        theirs: other[field],
        clash: () => clashes.push(`${row.key} ${field}`),
      }),
    })
  }
  const length = Math.max(row.readings.length, other.readings.length)
  merged.readings = Array.from({ length }, (_, index) =>
    pick({
      base: before.readings[index] ?? '',
      mine: row.readings[index] ?? '',
      theirs: other.readings[index] ?? '',
      clash: () => clashes.push(`${row.key} ${index + 1}`),
    }),
  )
  return merged
}
