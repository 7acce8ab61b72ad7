import type { BatchView } from '../api/batch-queries'
import { isReading, readingIn, rowOf, type Cell, type ReadingEntry, type Reading } from './cells'

export interface Commit extends Cell {
  text: string
  how: 'typed' | 'pasted'
}

export interface SortedCommit {
  /** first readings of their cells: on their way at once */
  fresh: ReadingEntry[]
  /** a saved reading changes: a reason is asked */
  corrections: (ReadingEntry & { before: string })[]
  /** the cell changed under the person's hands */
  clashes: { cell: Cell; mine: string; theirs: Reading }[]
  /** nothing to save: the same as saved, or emptied before it was saved */
  settled: Cell[]
  /** a saved reading cannot be emptied; it gets its value back */
  emptied: Cell[]
  /** no number: stays in the cell, marked */
  invalid: ReadingEntry[]
}

/**
 * Sorts what was entered by what it does to the record. `seen` names the reading that stood in a cell when the person began
 * to type, null for an empty one: what somebody else saved since is never overwritten unseen.
 */
export function sortCommit(given: {
  commits: readonly Commit[]
  batch: BatchView
  seen: (cell: Cell) => string | null | undefined
}): SortedCommit {
  const sorted: SortedCommit = {
    fresh: [],
    corrections: [],
    clashes: [],
    settled: [],
    emptied: [],
    invalid: [],
  }
  for (const { rowKey, columnKey, text: typed, how } of given.commits) {
    const cell = { rowKey, columnKey }
    const text = typed.trim()
    const saved = readingIn(rowOf(given.batch, rowKey), columnKey)
    if (text === (saved?.absorbance ?? '')) sorted.settled.push(cell)
    else if (text === '') sorted.emptied.push(cell)
    else {
      const seen = given.seen(cell)
      const savedId = saved?.id ?? null
      const entry: ReadingEntry = { ...cell, text, supersedes: savedId, source: how }
      if (!isReading(entry)) sorted.invalid.push(entry)
      else if (saved && seen !== undefined && seen !== savedId)
        sorted.clashes.push({ cell, mine: text, theirs: saved })
      else if (saved) sorted.corrections.push({ ...entry, before: saved.absorbance })
      else sorted.fresh.push(entry)
    }
  }
  return sorted
}

export interface AfterStale {
  /** the server already has exactly this: the answer was lost on its way */
  same: Cell[]
  /** nobody touched the cell: it was refused with the others and goes again */
  again: ReadingEntry[]
  /** somebody else filled or changed the cell */
  clashes: { cell: Cell; mine: string; theirs: Reading }[]
}

/** After a refusal because somebody else saved: what each unsent entry is worth against the batch as it is now. */
export function sortAfterStale(entries: readonly ReadingEntry[], batch: BatchView): AfterStale {
  const sorted: AfterStale = { same: [], again: [], clashes: [] }
  for (const entry of entries) {
    const cell = { rowKey: entry.rowKey, columnKey: entry.columnKey }
    const saved = readingIn(rowOf(batch, entry.rowKey), entry.columnKey)
    if (saved?.absorbance === entry.text) sorted.same.push(cell)
    else if ((saved?.id ?? null) === entry.supersedes) sorted.again.push(entry)
    else if (saved) sorted.clashes.push({ cell, mine: entry.text, theirs: saved })
    else sorted.again.push({ ...entry, supersedes: null })
  }
  return sorted
}
