import { useQuery } from '@tanstack/react-query'
import type { ReactNode } from 'react'
import { Link, NavLink } from 'react-router-dom'
import { todayQuery } from '../../features/today'
import { paths } from '../../lib/paths'
import { useSession } from '../../lib/session'
import { WeirMark } from '../../ui/weir-mark'
import { PersonMenu } from './person-menu'
import { Work } from './bench-layout'

/** The client's layout, for a phone at a pumping station: what is new, and four places at the foot. */
export function ClientLayout({ children }: { children: ReactNode }) {
  const { clientName, name } = useSession()
  const alerts = useQuery(todayQuery).data?.counts.alerts ?? 0
  return (
    <div className="client">
      <header className="client-top">
        <Link to={paths.portal} aria-label="Weirlight, Now">
          <WeirMark />
        </Link>
        <PersonMenu label={clientName ?? name} />
      </header>
      <div className="client-page">
        <Work>{children}</Work>
      </div>
      <nav className="client-foot" aria-label="Our utility">
        <NavLink to={paths.portal} end>
          Now
          {alerts > 0 && (
            <span className="count hot">
              {alerts}
              <span className="visually-hidden"> alerts to answer</span>
            </span>
          )}
        </NavLink>
        <NavLink to={paths.portalResults}>Results</NavLink>
        <NavLink to={paths.portalCertificates}>Certificates</NavLink>
        <NavLink to={paths.portalPoints}>Our points</NavLink>
      </nav>
    </div>
  )
}
