import { useSyncExternalStore } from 'react'

const query = window.matchMedia('(max-width: 1100px)')

function subscribe(listener: () => void): () => void {
  query.addEventListener('change', listener)
  return () => query.removeEventListener('change', listener)
}

/** A tablet or a phone: the margin folds. The same width stands in frame.css. */
export function useIsNarrow(): boolean {
  return useSyncExternalStore(subscribe, () => query.matches)
}
