import { useSyncExternalStore } from 'react'
import { notices } from '../lib/notices'

/** Where `useNotice` speaks: one line at the foot of the page. */
export function NoticeLine() {
  const notice = useSyncExternalStore(notices.subscribe, notices.current)
  return (
    <div role="status" aria-live="polite">
      {notice && (
        <div className="notice" key={notice.id}>
          <span>{notice.text}</span>
          <button type="button" onClick={notices.dismiss}>
            Close
          </button>
        </div>
      )}
    </div>
  )
}
