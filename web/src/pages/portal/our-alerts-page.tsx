import { useParams } from 'react-router-dom'
import { OurAlert, OurAlerts } from '../../features/portal'
import { paths } from '../../lib'
import { MarginPage } from '../../ui'

export function OurAlertsPage() {
  return (
    <MarginPage
      title="Our alerts"
      subtitle="Results of ours above a limit"
      back={{ to: paths.portal, label: 'Now' }}
    >
      <OurAlerts />
    </MarginPage>
  )
}

export function OurAlertPage() {
  const { id = '' } = useParams()
  return <OurAlert id={id} />
}
