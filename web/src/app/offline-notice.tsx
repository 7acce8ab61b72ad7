import { getSession } from '@weirlight/shared/contracts'
import { useEffect, useState } from 'react'
import { call } from '../lib/call'
import { onReachable } from '../lib/http'

const TRY_EVERY = 6000

/** Says that the server does not answer, and watches for the moment it does again. */
export function OfflineNotice() {
  const [isReachable, setReachable] = useState(true)
  useEffect(() => {
    const stop = onReachable(setReachable)
    const lost = () => setReachable(false)
    window.addEventListener('offline', lost)
    return () => {
      stop()
      window.removeEventListener('offline', lost)
    }
  }, [])
  useEffect(() => {
    if (isReachable) return
    // any answer at all is told through `onReachable`
    const timer = setInterval(() => void call(getSession, {}).catch(() => undefined), TRY_EVERY)
    return () => clearInterval(timer)
  }, [isReachable])
  if (isReachable) return null
  return (
    <div className="offline" role="alert">
      <strong>No connection to the laboratory’s server.</strong> Stay on this page: what you enter is kept on
      this computer and sent when the connection is back.
    </div>
  )
}
