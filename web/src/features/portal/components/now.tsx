import { useQuery } from '@tanstack/react-query'
import { Link } from 'react-router-dom'
import { paths } from '../../../lib'
import { Box, Loaded, MarkShape } from '../../../ui'
import { nowQuery, type Now } from '../api/portal-queries'
import { AlertCard } from './alert-card'
import { OwnResults } from './own-results'
import './portal.css'

/** What is new for a utility, and what waits for its answer. */
export function OwnNow() {
  return <Loaded query={useQuery(nowQuery)}>{(now) => <NowOnPage now={now} />}</Loaded>
}

function NowOnPage({ now }: { now: Now }) {
  return (
    <div className="stack">
      {now.alerts.length === 0 ? (
        <div className="box">
          <span className="state is-meets">
            <MarkShape shape="disc" /> Nothing waits for your answer.
          </span>
        </div>
      ) : (
        now.alerts.map((alert) => <AlertCard key={alert.id} alert={alert} />)
      )}
      <Box title="Latest results">
        {now.recent.length === 0 ? (
          <p className="quiet">Nothing is released for you yet.</p>
        ) : (
          <OwnResults rows={now.recent} />
        )}
      </Box>
      <p className="row">
        <Link to={paths.portalAlerts}>All our alerts</Link>
        <Link to={paths.portalResults}>All our results</Link>
      </p>
      <p className="note">
        {now.laboratoryName}
        {now.laboratoryPhone !== '' && (
          <>
            , <a href={`tel:${now.laboratoryPhone.replaceAll(' ', '')}`}>{now.laboratoryPhone}</a>
          </>
        )}
      </p>
    </div>
  )
}
