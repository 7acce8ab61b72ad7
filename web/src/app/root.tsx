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
