import { useEffect, useRef } from 'react'
import { useBlocker } from 'react-router-dom'

/**
 * Warns before a page with unsent entries is left. Inside the application it returns the blocker for
 * `LeaveDialog`; closing the tab is asked by the browser itself. Moves within the same page (filters) pass.
 */
export function useLeaveWarning(isDirty: boolean) {
  const isOff = useRef(false)
  const blocker = useBlocker(
    ({ currentLocation, nextLocation }) =>
      isDirty && !isOff.current && currentLocation.pathname !== nextLocation.pathname,
  )
  useEffect(() => {
    if (!isDirty) return
    const warn = (event: BeforeUnloadEvent) => event.preventDefault()
    window.addEventListener('beforeunload', warn)
    return () => window.removeEventListener('beforeunload', warn)
  }, [isDirty])
  return {
    blocker,
    /** what was entered has been sent: the next move is free, even before the page draws again */
    release: () => {
      isOff.current = true
    },
  }
}
