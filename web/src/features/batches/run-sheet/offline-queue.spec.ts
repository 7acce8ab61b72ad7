import { afterEach, describe, expect, it, vi } from 'vitest'
import { ProblemError } from '../../../lib'
import { SaveQueue } from '../../../lib/save-queue'
import type { ReadingEntry } from './cells'

// constructed throughout
const entry = (rowKey: string, text: string, part: Partial<ReadingEntry> = {}): ReadingEntry => ({
  rowKey,
  columnKey: '1',
  text,
  supersedes: null,
  source: 'typed',
  ...part,
})
const offline = () => new ProblemError({ code: 'offline', status: 0, title: '', detail: 'no answer' })

afterEach(() => vi.useRealTimers())

describe('readings and a lost connection', () => {
  it('wait, are kept with their reasons, and are sent when the server answers again', async () => {
    vi.useFakeTimers()
    let isDown = true
    const sent: ReadingEntry[][] = []
    let kept: ReadingEntry[] = []
    const queue = new SaveQueue<ReadingEntry>({
      delayMs: 10,
      retryMs: 100,
      keep: (entries) => (kept = entries),
      save: async (entries) => {
        if (isDown) throw offline()
        sent.push(entries)
      },
    })
    queue.put([entry('201', '0.0307'), entry('202', '0.0157', { supersedes: '7', reason: 'Read again' })])
    await vi.advanceTimersByTimeAsync(50)
    expect(queue.stateOf('201', '1')).toBe('waiting')
    expect(kept.map((each) => [each.text, each.reason])).toEqual([
      ['0.0307', undefined],
      ['0.0157', 'Read again'],
    ])
    queue.put([entry('203', '0.0200')])
    isDown = false
    await vi.advanceTimersByTimeAsync(5000)
    expect(sent).toHaveLength(1)
    expect(sent[0]?.map((each) => each.text)).toEqual(['0.0307', '0.0157', '0.0200'])
    expect(kept).toEqual([])
    expect(queue.isSettled).toBe(true)
  })

  it('come back from this computer after the page was closed', async () => {
    vi.useFakeTimers()
    const sent: ReadingEntry[][] = []
    const queue = new SaveQueue<ReadingEntry>({
      kept: [entry('201', '0.0307')],
      save: async (entries) => void sent.push(entries),
    })
    expect(queue.entries()).toMatchObject([{ entry: { text: '0.0307' }, state: 'waiting' }])
    await vi.advanceTimersByTimeAsync(100)
    expect(sent).toHaveLength(1)
  })

  it('can be taken back one by one, except while they are on their way', async () => {
    let answer: () => void = () => undefined
    const queue = new SaveQueue<ReadingEntry>({
      save: () => new Promise<void>((resolve) => (answer = resolve)),
    })
    queue.put([entry('201', '0.0307'), entry('202', '0.0157')])
    queue.drop('202', '1')
    expect(queue.entries().map((each) => each.entry.rowKey)).toEqual(['201'])
    const flushed = queue.flush()
    await Promise.resolve()
    queue.drop('201', '1')
    expect(queue.stateOf('201', '1')).toBe('saving')
    answer()
    await flushed
    expect(queue.isSettled).toBe(true)
  })
})
