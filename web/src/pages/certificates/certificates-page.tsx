import { Link, Navigate } from 'react-router-dom'
import { CertificatesList } from '../../features/certificates'
import { paths, useSession } from '../../lib'
import { MarginPage } from '../../ui'

export function CertificatesPage() {
  // a client has pages of its own
  if (useSession().role === 'client') return <Navigate to={paths.portalCertificates} replace />
  return (
    <MarginPage
      title="Certificates"
      subtitle="Issued, amended, sent, opened"
      notes={[
        'A certificate is frozen at issue. What was wrong is amended by a further certificate that says what was, what is and why; nothing is overwritten.',
        <>
          Anyone who holds one can check it on <Link to={paths.check}>the public page</Link>.
        </>,
      ]}
    >
      <CertificatesList />
    </MarginPage>
  )
}
