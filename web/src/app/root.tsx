import { Outlet, ScrollRestoration, useNavigation } from 'react-router-dom'
import { NoticeLine } from '../ui/notice-line'
import { OfflineNotice } from './offline-notice'

export function Root() {
  const isMoving = useNavigation().state === 'loading'
  return (
    <>
      {isMoving && <div className="moving" role="status" aria-label="The page is being loaded" />}
      <OfflineNotice />
      <Outlet />
      <NoticeLine />
      <ScrollRestoration getKey={(location) => location.pathname} />
    </>
  )
}

/** Before the first page is there: the ground of the theme and a line that moves. */
export function Opening() {
  return <div className="moving" role="status" aria-label="Weirlight is being opened" />
}
