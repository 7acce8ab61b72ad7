import { Navigate, useParams } from 'react-router-dom'
import { CertificateById } from '../../features/certificates'
import { paths, useSession } from '../../lib'

export function CertificatePage() {
  const { id = '' } = useParams()
  // a client has pages of its own
  if (useSession().role === 'client') return <Navigate to={paths.portalCertificate(id)} replace />
  return <CertificateById id={id} />
}
