/*
 * Entries of a grid on their way to the server. An entry is first kept on this computer, then sent with others in
 * one call; when the connection is lost it waits and is sent again; when the server refuses it the sentence stays on
 * its cell. Nothing leaves the queue before the server has said that it has it.
 */
import { asProblem, type ProblemError } from './problem-error'

export interface Entry {
  rowKey: string
  columnKey: string
  text: string
}
/** 'held' cannot be sent as it is (no number, say) and waits for the person, also over a reload */
export type EntryState = 'waiting' | 'held' | 'saving' | 'saved' | 'failed'

export interface QueueCell extends Entry {
  state: EntryState
  error?: string
}

export interface SaveQueueOptions<E extends Entry> {
  save: (entries: E[]) => Promise<unknown>
  /** the entry a refusal's path belongs to, e.g. `readings.3.absorbance` → index 3 */
  indexOf?: (path: string) => number | null
  /** an entry that would be refused is held: kept and not sent */
  isReady?: (entry: E) => boolean
  delayMs?: number
  retryMs?: number
  keep?: (entries: E[]) => void
  kept?: E[]
}

const cellKey = (rowKey: string, columnKey: string) => `${rowKey}\u0000${columnKey}`
const firstNumber = (path: string) => {
  const match = /(?:^|\.)(\d+)(?:\.|$)/.exec(path)
  return match ? Number(match[1]) : null
}

export class SaveQueue<E extends Entry> {
  private cells = new Map<string, { entry: E; state: EntryState; error?: string }>()
  private timer: ReturnType<typeof setTimeout> | undefined
  private running: Promise<void> | null = null
  private listeners = new Set<() => void>()
  private failures = 0
  problem: ProblemError | null = null
  version = 0

  constructor(private options: SaveQueueOptions<E>) {
    for (const entry of options.kept ?? []) this.set(entry)
    if (this.cells.size > 0) this.schedule(0)
  }

  /** the newest way to save: components hand in a new function each time they draw */
  use(options: Pick<SaveQueueOptions<E>, 'save' | 'isReady'>): void {
    this.options = { ...this.options, ...options }
  }

  subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener)
    return () => void this.listeners.delete(listener)
  }

  put(entries: readonly E[]): void {
    for (const entry of entries) this.set(entry)
    this.changed()
    this.schedule(this.options.delayMs ?? 600)
  }

  stateOf(rowKey: string, columnKey: string): EntryState | undefined {
    return this.cells.get(cellKey(rowKey, columnKey))?.state
  }
  errorOf(rowKey: string, columnKey: string): string | undefined {
    return this.cells.get(cellKey(rowKey, columnKey))?.error
  }
  /** what was entered and is not yet known to be on the server */
  textOf(rowKey: string, columnKey: string): string | undefined {
    const cell = this.cells.get(cellKey(rowKey, columnKey))
    return cell && cell.state !== 'saved' ? cell.entry.text : undefined
  }
  /** what the server does not have yet, with how it stands */
  entries(): { entry: E; state: EntryState; error: string | undefined }[] {
    return this.open().map(({ entry, state, error }) => ({ entry, state, error }))
  }
  /** takes one entry back; what is just being sent stays until the server has answered */
  drop(rowKey: string, columnKey: string): void {
    const key = cellKey(rowKey, columnKey)
    if (this.cells.get(key)?.state === 'saving') return
    if (this.cells.delete(key)) this.changed()
  }
  count(state: EntryState): number {
    return [...this.cells.values()].filter((cell) => cell.state === state).length
  }
  get isSettled(): boolean {
    return this.open().length === 0
  }

  /** Sends what waits now; resolves when the queue rests (saved, refused or without connection). */
  async flush(): Promise<void> {
    clearTimeout(this.timer)
    await this.running
    const ready = this.ready()
    if (ready.length === 0) return
    this.running = this.send(ready)
    await this.running
    this.running = null
    if (this.problem === null && this.ready().length > 0) await this.flush()
  }

  stop(): void {
    clearTimeout(this.timer)
  }

  private open() {
    return [...this.cells.values()].filter((cell) => cell.state !== 'saved')
  }
  private ready() {
    return [...this.cells.values()].filter((cell) => cell.state === 'waiting')
  }
  private set(entry: E) {
    const isReady = this.options.isReady?.(entry) ?? true
    this.cells.set(cellKey(entry.rowKey, entry.columnKey), { entry, state: isReady ? 'waiting' : 'held' })
  }
  private schedule(delay: number) {
    clearTimeout(this.timer)
    this.timer = setTimeout(() => void this.flush(), delay)
  }
  private changed() {
    this.version += 1
    this.options.keep?.(this.open().map((cell) => cell.entry))
    this.listeners.forEach((listener) => listener())
  }

  private async send(batch: ReturnType<SaveQueue<E>['ready']>): Promise<void> {
    for (const cell of batch) cell.state = 'saving'
    this.changed()
    // a cell typed into meanwhile is another object in the map and stays 'waiting'
    try {
      await this.options.save(batch.map((cell) => cell.entry))
      for (const cell of batch) cell.state = 'saved'
      this.problem = null
      this.failures = 0
    } catch (error) {
      this.refused(batch, asProblem(error))
    }
    this.changed()
  }

  private refused(batch: ReturnType<SaveQueue<E>['ready']>, problem: ProblemError) {
    this.problem = problem
    if (problem.code === 'offline' || problem.code === 'unavailable') {
      for (const cell of batch) cell.state = 'waiting'
      this.failures += 1
      this.schedule(Math.min((this.options.retryMs ?? 2000) * 2 ** (this.failures - 1), 30_000))
      return
    }
    const indexOf = this.options.indexOf ?? firstNumber
    const byIndex = new Map(problem.errors.map((each) => [indexOf(each.path), each.message]))
    const isNamed = batch.some((_, index) => byIndex.has(index))
    batch.forEach((cell, index) => {
      const message = byIndex.get(index)
      // the server takes all or none: what it did not complain about is sent again without the bad ones
      if (message === undefined && isNamed) {
        cell.state = 'waiting'
        return
      }
      cell.state = 'failed'
      cell.error = message ?? problem.message
    })
    if (isNamed && batch.some((cell) => cell.state === 'waiting')) this.schedule(0)
  }
}

/** The queue in a sentence, for the margin. */
export function savedSentence(counts: {
  saved: number
  open: number
  failed: number
  isOffline: boolean
  what: [one: string, many: string]
}): string {
  const { saved, open, failed, isOffline } = counts
  const name = (n: number) => `${n} ${n === 1 ? counts.what[0] : counts.what[1]}`
  if (failed > 0) return `${name(failed)} not saved: see the marked cells.`
  if (open > 0) {
    const does = open === 1 ? 'waits' : 'wait'
    return isOffline
      ? `${name(open)} ${does} for the connection; kept on this computer.`
      : `Saving ${name(open)}…`
  }
  if (saved === 0) return `No ${counts.what[1]} yet.`
  return saved === 1 ? `1 ${counts.what[0]} is saved.` : `All ${saved} ${counts.what[1]} are saved.`
}
