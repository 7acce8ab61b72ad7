import { Navigate } from 'react-router-dom'
import { paths } from '../lib/paths'
import { useSession } from '../lib/session'
import { useTitle } from '../lib/use-title'
import { NotFound } from '../ui/page-states'

/** The first address of each role. */
export function HomePage() {
  const { role } = useSession()
  return <Navigate to={role === 'client' ? paths.portal : paths.today} replace />
}

export function NotFoundPage() {
  useTitle('No such page')
  return (
    <div className="page-sheet">
      <h1 className="visually-hidden">No such page</h1>
      <NotFound />
    </div>
  )
}
