import { Navigate } from 'react-router-dom'
import { AlertsList } from '../../features/alerts'
import { paths, useSession } from '../../lib'
import { MarginPage } from '../../ui'

export function AlertsPage() {
  // a client has pages of its own
  if (useSession().role === 'client') return <Navigate to={paths.portalAlerts} replace />
  return (
    <MarginPage
      title="Alerts"
      subtitle="Released results above a limit"
      notes={[
        'An alert is raised with the release, mailed to the client’s alert contacts, and answered by the client.',
        'An alert reports a laboratory result. It is not a determination of compliance or violation: the primacy agency decides under its current rules.',
      ]}
    >
      <AlertsList />
    </MarginPage>
  )
}
