import { useEffect, useMemo, useState, useSyncExternalStore } from 'react'
import { SaveQueue, savedSentence, type Entry, type SaveQueueOptions } from './save-queue'
import { useSession } from './session'

interface Options<E extends Entry> extends Pick<SaveQueueOptions<E>, 'save' | 'isReady' | 'indexOf'> {
  /** names the grid on this computer, e.g. `batch-12` */
  name: string
  /** entries the server already has, for the sentence */
  savedCount?: number
  what?: [one: string, many: string]
}

function storage(key: string) {
  return {
    read: <E>(): E[] => {
      try {
        return JSON.parse(localStorage.getItem(key) ?? '[]') as E[]
      } catch {
        return []
      }
    },
    write: (entries: unknown[]) => {
      try {
        if (entries.length === 0) localStorage.removeItem(key)
        else localStorage.setItem(key, JSON.stringify(entries))
      } catch {
        // a full or forbidden storage costs the second safety only; the queue still holds the entries
      }
    },
  }
}

// a queue outlives its page: entries made just before leaving are still sent, and coming back finds the same queue
const queues = new Map<string, unknown>()

function queueFor<E extends Entry>(key: string, options: SaveQueueOptions<E>): SaveQueue<E> {
  const known = queues.get(key) as SaveQueue<E> | undefined
  if (known) return known
  const store = storage(key)
  const made = new SaveQueue<E>({ ...options, keep: store.write, kept: store.read<E>() })
  queues.set(key, made)
  return made
}

/** The save queue of one grid, kept per person on this computer until the server has every entry. */
export function useSaveQueue<E extends Entry>(options: Options<E>) {
  const { userId } = useSession()
  const { name, save, isReady, indexOf, savedCount = 0, what = ['reading', 'readings'] } = options
  const [queue] = useState(() =>
    queueFor<E>(`weirlight:queue:${userId}:${name}`, {
      save,
      ...(isReady ? { isReady } : {}),
      ...(indexOf ? { indexOf } : {}),
    }),
  )
  useEffect(() => {
    queue.use({ save, ...(isReady ? { isReady } : {}) })
  }, [queue, save, isReady])
  useEffect(() => {
    const warn = (event: BeforeUnloadEvent) => {
      if (queue.isSettled) return
      void queue.flush()
      event.preventDefault()
    }
    window.addEventListener('beforeunload', warn)
    return () => {
      window.removeEventListener('beforeunload', warn)
      void queue.flush()
    }
  }, [queue])
  useSyncExternalStore(queue.subscribe, () => queue.version)

  const moves = useMemo(
    () => ({
      put: (entries: readonly E[]) => queue.put(entries),
      stateOf: (rowKey: string, columnKey: string) => queue.stateOf(rowKey, columnKey),
      errorOf: (rowKey: string, columnKey: string) => queue.errorOf(rowKey, columnKey),
      textOf: (rowKey: string, columnKey: string) => queue.textOf(rowKey, columnKey),
      entries: () => queue.entries(),
      drop: (rowKey: string, columnKey: string) => queue.drop(rowKey, columnKey),
      settledNow: () => queue.isSettled,
      flush: () => queue.flush(),
    }),
    [queue],
  )
  const isOffline = queue.problem?.code === 'offline'
  return {
    ...moves,
    isSettled: queue.isSettled,
    isOffline,
    problem: queue.problem,
    summary: savedSentence({
      saved: savedCount,
      open: queue.count('waiting') + queue.count('saving'),
      failed: queue.count('failed') + queue.count('held'),
      isOffline,
      what,
    }),
  }
}
