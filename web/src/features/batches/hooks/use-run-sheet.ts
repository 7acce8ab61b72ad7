import { useQueryClient } from '@tanstack/react-query'
import { listBatches, saveReadings } from '@weirlight/shared/contracts'
import { useCallback, useEffect, useRef, useState } from 'react'
import { call, invalidate, serverNow, useSaveQueue } from '../../../lib'
import type { CellState } from '../../../ui/run-grid'
import { batchQuery, type BatchView } from '../api/batch-queries'
import {
  cellName,
  isReading,
  readingIn,
  rowOf,
  type Cell,
  type Reading,
  type ReadingEntry,
} from '../run-sheet/cells'
import { liveBatch } from '../run-sheet/live-batch'
import { sortAfterStale, sortCommit, type Commit, type SortedCommit } from '../run-sheet/sort-commit'

interface Typed {
  text: string
  /** the reading that stood in the cell when typing began */
  seen: string | null
}
export interface Clash {
  cell: Cell
  mine: string
  theirs: Reading
}

/**
 * The entries of one run sheet: what is being typed, what is on its way, what is saved, where two people met in one cell, and
 * which corrections wait for a reason.
 */
export function useRunSheet(batch: BatchView) {
  const client = useQueryClient()
  const latest = useRef(batch)
  latest.current = batch
  const [typed, setTyped] = useState<ReadonlyMap<string, Typed>>(new Map())
  const [clashes, setClashes] = useState<readonly Clash[]>([])
  const [corrections, setCorrections] = useState<SortedCommit['corrections']>([])
  const [notices, setNotices] = useState<readonly string[]>([])
  const savedCount = batch.rows.reduce((sum, row) => sum + row.readings.length, 0)

  const take = useCallback(
    (answer: BatchView) => {
      client.setQueryData(batchQuery(answer.id).queryKey, answer)
      void invalidate(client, [listBatches])
    },
    [client],
  )

  const save = useCallback(
    async (entries: ReadingEntry[]) => {
      // an answer that was on its way must not put older readings back
      await client.cancelQueries({ queryKey: batchQuery(batch.id).queryKey })
      const answer = await call(saveReadings, {
        params: { id: batch.id },
        body: {
          source: entries.every((entry) => entry.source === 'pasted') ? 'pasted' : 'typed',
          readings: entries.map((entry) => ({
            positionId: entry.rowKey,
            replicate: Number(entry.columnKey),
            absorbance: entry.text,
            supersedes: entry.supersedes,
            ...(entry.reason ? { reason: entry.reason } : {}),
          })),
        },
      })
      take(answer)
    },
    [batch.id, client, take],
  )
  const queue = useSaveQueue<ReadingEntry>({
    name: `batch-${batch.id}`,
    save,
    savedCount,
    isReady: isReading,
  })
  const { problem } = queue

  const forgetTyped = useCallback((cells: readonly Cell[]) => {
    setTyped((current) => {
      const next = new Map(current)
      for (const cell of cells) next.delete(cellName(cell))
      return next
    })
  }, [])

  const { entries, drop, put } = queue
  /** What the batch says about the entries the server refused: it has them already, or somebody else filled their cells. */
  const explain = useCallback(
    (fresh: BatchView, refused: readonly ReadingEntry[]) => {
      const sorted = sortAfterStale(refused, fresh)
      const answered = [...sorted.same, ...sorted.clashes.map((each) => each.cell)]
      for (const cell of answered) drop(cell.rowKey, cell.columnKey)
      setClashes((current) => withClashes(current, sorted.clashes))
      return { answered: answered.length, again: sorted.again }
    },
    [drop],
  )

  // after a refusal: explain it by the batch as it is now, and send the others again
  const mended = useRef<unknown>(null)
  useEffect(() => {
    if (!problem || isWorthWaiting(problem.code) || mended.current === problem) return
    mended.current = problem
    const refused = refusedIn(entries())
    const mend = async () => {
      const fresh = await client.fetchQuery({ ...batchQuery(batch.id), staleTime: 0 })
      const { answered, again } = explain(fresh, refused)
      // where nothing explains the refusal, entries stay marked rather than go in circles
      if (problem.code === 'stale' && answered > 0 && again.length > 0) put(again)
    }
    // without a connection the cells stay marked, until the batch is read again
    mend().catch(() => undefined)
  }, [problem, client, batch.id, entries, explain, put])
  useEffect(() => void explain(batch, refusedIn(entries())), [batch, entries, explain])

  const valueOf = (rowKey: string, columnKey: string): string => {
    const cell = { rowKey, columnKey }
    const clash = clashes.find((each) => cellName(each.cell) === cellName(cell))
    return (
      typed.get(cellName(cell))?.text ??
      clash?.mine ??
      queue.textOf(rowKey, columnKey) ??
      readingIn(rowOf(batch, rowKey), columnKey)?.absorbance ??
      ''
    )
  }

  const cellState = (rowKey: string, columnKey: string): CellState => {
    const clash = clashes.find((each) => cellName(each.cell) === cellName({ rowKey, columnKey }))
    if (clash) {
      return {
        saved: 'failed',
        error: `${clash.theirs.readBy.name} entered ${clash.theirs.absorbance} meanwhile: choose above.`,
      }
    }
    const state = queue.stateOf(rowKey, columnKey)
    return { saved: state === 'held' ? 'failed' : state, error: queue.errorOf(rowKey, columnKey) }
  }

  const onChange = (changes: readonly Commit[]) => {
    setTyped((current) => {
      const next = new Map(current)
      for (const { rowKey, columnKey, text } of changes) {
        const name = cellName({ rowKey, columnKey })
        const seen =
          current.get(name)?.seen ?? readingIn(rowOf(latest.current, rowKey), columnKey)?.id ?? null
        next.set(name, { text, seen })
      }
      return next
    })
  }

  const onCommit = async (changes: readonly Commit[]) => {
    const seen = new Map(changes.map((change) => [cellName(change), typed.get(cellName(change))?.seen]))
    // what is being sent right now is a saved reading in a moment, and changing it needs a reason then
    if (changes.some((change) => queue.stateOf(change.rowKey, change.columnKey) === 'saving')) {
      await queue.flush()
      for (const change of changes) seen.delete(cellName(change))
    }
    const sorted = sortCommit({
      commits: changes,
      batch: latest.current,
      seen: (cell) => seen.get(cellName(cell)),
    })
    const answered = [...sorted.settled, ...sorted.emptied, ...sorted.clashes.map((each) => each.cell)]
    for (const cell of answered) queue.drop(cell.rowKey, cell.columnKey)
    for (const cell of sorted.corrections) {
      if (queue.stateOf(cell.rowKey, cell.columnKey) === 'held') queue.drop(cell.rowKey, cell.columnKey)
    }
    // what is no number is kept on this computer, so that a reload does not lose it
    const entries = [...sorted.fresh, ...sorted.invalid]
    if (entries.length > 0) queue.put(entries)
    setClashes((current) => withClashes(current, sorted.clashes))
    setCorrections((current) => [...current, ...sorted.corrections])
    setNotices(
      sorted.emptied.length > 0
        ? ['A saved reading cannot be emptied: correct it, or say in the note what happened.']
        : [],
    )
    forgetTyped([...sorted.fresh, ...answered])
  }

  const correct = (reason: string) => {
    queue.put(corrections.map(({ before: _, ...entry }) => ({ ...entry, reason })))
    forgetTyped(corrections)
    setCorrections([])
  }
  const leaveUncorrected = () => {
    forgetTyped(corrections)
    setCorrections([])
  }

  const keepTheirs = (clash: Clash) => setClashes((current) => current.filter((each) => each !== clash))
  const enterMine = (clash: Clash) => {
    keepTheirs(clash)
    setTyped((current) =>
      new Map(current).set(cellName(clash.cell), { text: clash.mine, seen: clash.theirs.id }),
    )
    setCorrections((current) => [
      ...current,
      {
        ...clash.cell,
        text: clash.mine,
        supersedes: clash.theirs.id,
        source: 'typed',
        before: clash.theirs.absorbance,
      },
    ])
  }

  // cheap enough for every keystroke: see the engine's speed in shared/bench
  const live = liveBatch({ batch, textOf: valueOf, now: new Date(serverNow()).toISOString() })
  const isAllSaved = queue.isSettled && typed.size === 0 && clashes.length === 0
  return {
    rows: live.rows,
    findings: isAllSaved ? batch.findingsList : live.findings,
    missing: live.missing,
    read: live.read,
    cells: live.cells,
    isAllSaved,
    valueOf,
    cellState,
    onChange,
    onCommit: (changes: readonly Commit[]) => void onCommit(changes),
    clashes,
    keepTheirs,
    enterMine,
    corrections,
    correct,
    leaveUncorrected,
    notices,
    forgetNotices: () => setNotices([]),
    queue,
    take,
  }
}
export type RunSheet = ReturnType<typeof useRunSheet>

const isWorthWaiting = (code: string) => code === 'offline' || code === 'unavailable' || code === 'signed-out'

const refusedIn = (entries: readonly { entry: ReadingEntry; state: string }[]) =>
  entries.filter((each) => each.state === 'failed').map((each) => each.entry)

function withClashes(current: readonly Clash[], found: readonly Clash[]): readonly Clash[] {
  const names = new Set(found.map((each) => cellName(each.cell)))
  return found.length === 0
    ? current
    : [...current.filter((each) => !names.has(cellName(each.cell))), ...found]
}
