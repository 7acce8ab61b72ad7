import { useQuery, useQueryClient } from '@tanstack/react-query'
import type { SessionView } from '@weirlight/shared/contracts'
import { PERMISSIONS, can, type Action } from '@weirlight/shared/permissions'
import { Suspense, useEffect, useRef, useSyncExternalStore } from 'react'
import { Navigate, Outlet, useLocation, useMatches } from 'react-router-dom'
import { SignInDialog } from '../features/session'
import { asProblem } from '../lib/problem-error'
import { isSignInNeeded, subscribeToSignInNeed, waitForSignIn } from '../lib/re-sign-in'
import { SessionContext, sessionQuery } from '../lib/session'
import { paths } from '../lib/paths'
import { MarginPage } from '../ui/margin-page'
import { Failed, Forbidden, SkeletonPage } from '../ui/page-states'
import { BenchLayout } from './layouts/bench-layout'
import { ClientLayout } from './layouts/client-layout'

/** Everything behind the door. A session that ends while a page is open is mended over the page, never by leaving it. */
export function SignedIn() {
  const { pathname, search } = useLocation()
  const query = useQuery(sessionQuery)
  const client = useQueryClient()
  const kept = useRef<SessionView | null>(null)
  const isNeeded = useSyncExternalStore(subscribeToSignInNeed, isSignInNeeded)
  const found = query.data?.session ?? null
  const hasEnded = query.data !== undefined && found === null

  useEffect(() => {
    if (found && kept.current && found.userId !== kept.current.userId) {
      // somebody else signed in, in another window: nothing of the first person may stay in memory
      window.location.assign(paths.today)
    }
    if (found) kept.current = found
  }, [found])

  useEffect(() => {
    if (!hasEnded || kept.current === null) return
    waitForSignIn()
      .then(() => client.invalidateQueries())
      .catch(() => undefined)
  }, [hasEnded, client])

  // the last known person stays on the page while the dialog asks for the passphrase
  const session = found ?? kept.current
  if (session === null) {
    if (query.isError) {
      return (
        <div className="page-sheet">
          <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
        </div>
      )
    }
    if (!hasEnded) return <SkeletonPage />
    const next = `${pathname}${search}`
    return (
      <Navigate
        to={next === '/' ? paths.signIn : `${paths.signIn}?next=${encodeURIComponent(next)}`}
        replace
      />
    )
  }
  const Layout = session.role === 'client' ? ClientLayout : BenchLayout
  return (
    <SessionContext value={session}>
      <Layout>
        <Guarded session={session} />
      </Layout>
      {isNeeded && (
        <Suspense fallback={null}>
          <SignInDialog email={session.email} name={session.name} />
        </Suspense>
      )}
    </SessionContext>
  )
}

function neededAction(handle: unknown): Action | null {
  if (typeof handle !== 'object' || handle === null || !('needs' in handle)) return null
  const { needs } = handle
  return typeof needs === 'string' && needs in PERMISSIONS ? (needs as Action) : null
}

/** Shows the page, or says that it is not open to this role. The server refuses by the same table. */
function Guarded({ session }: { session: SessionView }) {
  const isAllowed = useMatches().every((match) => {
    const action = neededAction(match.handle)
    return action === null || can(session, action)
  })
  return isAllowed ? (
    <Outlet />
  ) : (
    <MarginPage title="Not open to your role">
      <div className="box">
        <Forbidden />
      </div>
    </MarginPage>
  )
}
