import { useParams } from 'react-router-dom'
import { OurCertificate, OurCertificates } from '../../features/portal'
import { MarginPage } from '../../ui'

export function OurCertificatesPage() {
  return (
    <MarginPage title="Our certificates" subtitle="Newest first">
      <OurCertificates />
    </MarginPage>
  )
}

export function OurCertificatePage() {
  const { id = '' } = useParams()
  return <OurCertificate id={id} />
}
