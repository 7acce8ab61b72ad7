import { useSyncExternalStore } from 'react'
import { serverNow } from './server-clock'

const STEP = 10_000
const listeners = new Set<() => void>()
let timer: ReturnType<typeof setInterval> | undefined
let now = serverNow()

function subscribe(listener: () => void): () => void {
  listeners.add(listener)
  now = serverNow()
  timer ??= setInterval(() => {
    now = serverNow()
    listeners.forEach((each) => each())
  }, STEP)
  return () => {
    listeners.delete(listener)
    if (listeners.size > 0) return
    clearInterval(timer)
    timer = undefined
  }
}

/** The server's time, moving on every ten seconds; one timer for all clocks of a page. */
export function useNow(): number {
  return useSyncExternalStore(subscribe, () => now)
}
