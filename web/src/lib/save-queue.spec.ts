import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { ProblemError } from './problem-error'
import { SaveQueue, savedSentence, type Entry } from './save-queue'

const entry = (rowKey: string, text: string): Entry => ({ rowKey, columnKey: '1', text })
const offline = () => new ProblemError({ code: 'offline', status: 0, title: '', detail: 'No answer.' })

beforeEach(() => void vi.useFakeTimers())
afterEach(() => void vi.useRealTimers())

describe('SaveQueue', () => {
  it('sends what was typed together in one call', async () => {
    const save = vi.fn(async () => undefined)
    const queue = new SaveQueue({ save })
    queue.put([entry('1', '0.1')])
    queue.put([entry('2', '0.2')])
    expect(queue.stateOf('1', '1')).toBe('waiting')
    await vi.runAllTimersAsync()
    expect(save).toHaveBeenCalledExactlyOnceWith([entry('1', '0.1'), entry('2', '0.2')])
    expect(queue.stateOf('2', '1')).toBe('saved')
    expect(queue.isSettled).toBe(true)
  })

  it('loses nothing when the connection breaks, and sends it when it is back', async () => {
    let isDown = true
    const sent: Entry[][] = []
    const kept: Entry[][] = []
    const queue = new SaveQueue({
      save: async (entries) => {
        if (isDown) throw offline()
        sent.push(entries)
      },
      keep: (entries) => kept.push(entries),
    })
    queue.put([entry('1', '0.1')])
    await vi.advanceTimersByTimeAsync(5000)
    expect(queue.stateOf('1', '1')).toBe('waiting')
    expect(queue.textOf('1', '1')).toBe('0.1')
    expect(kept.at(-1)).toEqual([entry('1', '0.1')])
    isDown = false
    await vi.advanceTimersByTimeAsync(30_000)
    expect(sent).toEqual([[entry('1', '0.1')]])
    expect(kept.at(-1)).toEqual([])
  })

  it('keeps what is typed into a cell while it is being sent', async () => {
    const sent: Entry[][] = []
    const queue = new SaveQueue({
      save: async (entries) => {
        sent.push(entries)
        await new Promise((resolve) => setTimeout(resolve, 1000))
      },
    })
    queue.put([entry('1', '0.1')])
    await vi.advanceTimersByTimeAsync(700)
    expect(queue.stateOf('1', '1')).toBe('saving')
    queue.put([entry('1', '0.12')])
    await vi.runAllTimersAsync()
    expect(sent).toEqual([[entry('1', '0.1')], [entry('1', '0.12')]])
    expect(queue.isSettled).toBe(true)
  })

  it('puts a refusal on its cell and sends the others without it', async () => {
    const sent: Entry[][] = []
    const queue = new SaveQueue({
      save: async (entries) => {
        const bad = entries.findIndex((each) => each.text === '9')
        if (bad < 0) return void sent.push(entries)
        throw new ProblemError({
          code: 'invalid-input',
          status: 422,
          title: '',
          detail: 'One reading is not possible.',
          errors: [{ path: `readings.${bad}.absorbance`, message: 'The absorbance must lie below 4.' }],
        })
      },
    })
    queue.put([entry('1', '0.1'), entry('2', '9'), entry('3', '0.3')])
    await vi.runAllTimersAsync()
    expect(queue.errorOf('2', '1')).toBe('The absorbance must lie below 4.')
    expect(queue.stateOf('2', '1')).toBe('failed')
    expect(sent).toEqual([[entry('1', '0.1'), entry('3', '0.3')]])
    queue.put([entry('2', '0.9')])
    await vi.runAllTimersAsync()
    expect(queue.stateOf('2', '1')).toBe('saved')
    expect(queue.errorOf('2', '1')).toBeUndefined()
  })

  it('goes on with what an earlier visit left', async () => {
    const save = vi.fn(async () => undefined)
    const queue = new SaveQueue({ save, kept: [entry('4', '0.4')] })
    await vi.runAllTimersAsync()
    expect(save).toHaveBeenCalledExactlyOnceWith([entry('4', '0.4')])
    expect(queue.isSettled).toBe(true)
  })

  it('does not send what would be refused', async () => {
    const save = vi.fn(async () => undefined)
    const queue = new SaveQueue({ save, isReady: (each) => each.text !== '' })
    queue.put([entry('1', ''), entry('2', '0.2')])
    await vi.runAllTimersAsync()
    expect(save).toHaveBeenCalledExactlyOnceWith([entry('2', '0.2')])
    expect(queue.isSettled).toBe(false)
    expect(queue.stateOf('1', '1')).toBe('held')
    expect(queue.textOf('1', '1')).toBe('')
  })
})

describe('savedSentence', () => {
  const what: [string, string] = ['reading', 'readings']
  it.each([
    [{ saved: 22, open: 0, failed: 0, isOffline: false }, 'All 22 readings are saved.'],
    [{ saved: 0, open: 0, failed: 0, isOffline: false }, 'No readings yet.'],
    [
      { saved: 4, open: 1, failed: 0, isOffline: true },
      '1 reading waits for the connection; kept on this computer.',
    ],
    [{ saved: 4, open: 3, failed: 0, isOffline: false }, 'Saving 3 readings…'],
    [{ saved: 4, open: 3, failed: 2, isOffline: false }, '2 readings not saved: see the marked cells.'],
  ])('%o', (counts, sentence) => {
    expect(savedSentence({ ...counts, what })).toBe(sentence)
  })
})
