import { useSyncExternalStore } from 'react'

const query = window.matchMedia('(max-width: 640px)')

function subscribe(listener: () => void): () => void {
  query.addEventListener('change', listener)
  return () => query.removeEventListener('change', listener)
}

/** So narrow that label and readings alone have room. The same width stands in batches.css. */
export function useIsPhone(): boolean {
  return useSyncExternalStore(subscribe, () => query.matches)
}
