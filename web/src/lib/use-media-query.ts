import { useCallback, useSyncExternalStore } from 'react'

/** Whether the window matches, and again whenever that changes. */
export function useMediaQuery(text: string): boolean {
  const subscribe = useCallback(
    (listener: () => void) => {
      const query = window.matchMedia(text)
      query.addEventListener('change', listener)
      return () => query.removeEventListener('change', listener)
    },
    [text],
  )
  return useSyncExternalStore(subscribe, () => window.matchMedia(text).matches)
}
