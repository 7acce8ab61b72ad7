import { Navigate, useParams } from 'react-router-dom'
import { AlertById } from '../../features/alerts'
import { paths, useSession } from '../../lib'

export function AlertPage() {
  const { id = '' } = useParams()
  // a client has pages of its own
  if (useSession().role === 'client') return <Navigate to={paths.portalAlert(id)} replace />
  return <AlertById id={id} />
}
