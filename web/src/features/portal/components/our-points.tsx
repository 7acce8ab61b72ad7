import { useQuery } from '@tanstack/react-query'
import { Link } from 'react-router-dom'
import { paths } from '../../../lib'
import { Box, Empty, Loaded, MarkShape } from '../../../ui'
import { determinationOf, findingOf, withUnit } from '../../results'
import { latestQuery, utilityQuery, type Point, type Utility } from '../api/portal-queries'
import { latestOfEach } from '../latest'
import './portal.css'

/** Our sampling points with the last result of each determination, and whom the laboratory writes to. */
export function OurPoints() {
  return (
    <Loaded query={useQuery(utilityQuery)}>
      {(utility) => (
        <div className="stack">
          <Points utility={utility} />
          <Contacts utility={utility} />
          <Box title={utility.name}>
            <p className="quiet">
              {utility.systemId !== '' && `System ${utility.systemId}. `}
              {utility.address}
            </p>
            <p className="quiet">Limits: {utility.programmeName}.</p>
          </Box>
        </div>
      )}
    </Loaded>
  )
}

const KINDS: Record<Point['kind'], string> = {
  source: 'source',
  raw: 'raw water',
  treated: 'treated water',
  distribution: 'distribution',
  tap: 'tap',
  waste: 'waste water',
}

function Points({ utility }: { utility: Utility }) {
  const latest = useQuery(latestQuery)
  const rows = latestOfEach(latest.data?.items ?? [])
  const points = utility.points.toSorted(
    (a, b) => Number(b.active) - Number(a.active) || a.code.localeCompare(b.code),
  )
  if (points.length === 0) {
    return (
      <Box>
        <Empty title="No sampling point is set up for you yet">The laboratory adds them.</Empty>
      </Box>
    )
  }
  return (
    <Box>
      <ul className="own-lines">
        {points.map((point) => (
          <li key={point.id}>
            <Link className="own-line" to={paths.portalPoint(point.id)}>
              <span className="own-what">
                <span>{point.name}</span>
                <span className="quiet own-small">
                  {point.code} · {KINDS[point.kind]}
                  {!point.active && ' · no longer sampled'}
                </span>
              </span>
              <span className="own-latest">
                {rows
                  .filter((row) => row.pointId === point.id)
                  .map((row) => {
                    const { mark } = findingOf(row)
                    return (
                      <span key={row.id} className={`is-${mark.tone}`}>
                        <MarkShape shape={mark.shape} />
                        <span className="visually-hidden">{mark.word}:</span> {determinationOf(row)}{' '}
                        {withUnit(row)}
                      </span>
                    )
                  })}
                {latest.isSuccess && rows.every((row) => row.pointId !== point.id) && (
                  <span className="quiet">no result yet</span>
                )}
              </span>
            </Link>
          </li>
        ))}
      </ul>
    </Box>
  )
}

function Contacts({ utility }: { utility: Utility }) {
  return (
    <Box title="Whom the laboratory writes to">
      {utility.contacts.length === 0 ? (
        <p className="above">Nobody. Ask the laboratory to add a contact, or no alert can reach you.</p>
      ) : (
        <ul className="own-lines">
          {utility.contacts.map((contact) => (
            <li key={contact.id} className="own-line">
              <span className="own-what">
                <span>{contact.name}</span>
                <span className="quiet own-small break">{contact.email}</span>
              </span>
              <span className="own-latest quiet">
                {contact.getsAlerts && <span>alerts</span>}
                {contact.getsCertificates && <span>certificates</span>}
              </span>
            </li>
          ))}
        </ul>
      )}
      <p className="note">To change a contact, tell the laboratory; the old address is told as well.</p>
    </Box>
  )
}
