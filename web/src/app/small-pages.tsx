import { Navigate } from 'react-router-dom'
import { paths } from '../lib/paths'
import { useSession } from '../lib/session'

/** The first address of each role. */
export function HomePage() {
  const { role } = useSession()
  return <Navigate to={role === 'client' ? paths.portal : paths.today} replace />
}
