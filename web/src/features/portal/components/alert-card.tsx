import { showUnit } from '@weirlight/shared/contracts'
import { Button } from 'antd'
import { useState } from 'react'
import { Link } from 'react-router-dom'
import { paths, useCan, useLaboratoryTime } from '../../../lib'
import { Clock, StatusTag } from '../../../ui'
import { Agency, earlierWords, overWhat, SeenDialog } from '../../alerts'
import { determinationOf, TrendFigure, withUnit } from '../../results'
import type { OwnAlert } from '../api/portal-queries'
import './portal.css'

/** What needs an answer: the finding, its trend, and two things to do. */
export function AlertCard({ alert }: { alert: OwnAlert }) {
  const may = useCan()
  const { at } = useLaboratoryTime()
  const [isAsked, setAsked] = useState(false)
  const before = alert.trend.points.filter((point) => point.resultId !== alert.resultId)
  const shown = before.slice(-12)
  const number = withUnit({ text: alert.text, unit: alert.unit === 'ug/L' ? 'ug/L' : 'mg/L' })
  return (
    <article className="box alert-card" aria-label={`Alert ${alert.number}`}>
      <StatusTag mark={{ word: 'above', shape: 'triangle', tone: 'above' }}>
        {determinationOf(alert)} {overWhat(alert)}
      </StatusTag>
      <h2>
        <Link to={paths.portalAlert(alert.id)}>
          {number} at {alert.pointName}
        </Link>
      </h2>
      <p className="quiet">
        Collected {at(alert.collectedAt)}. Released {at(alert.releasedAt)}. {earlierWords(shown, alert.unit)}
      </p>
      {alert.answerDueAt !== null && (
        <p>
          Your answer: <Clock dueAt={alert.answerDueAt} />
        </p>
      )}
      {alert.trend.points.length > 1 && (
        <TrendFigure
          trend={{ ...alert.trend, points: alert.trend.points.slice(-13) }}
          height={170}
          isExplained={false}
        />
      )}
      <p className="note">
        {alert.caution} Limit: {alert.limitName}, {alert.limitValue} {showUnit(alert.limitUnit)}. Agency:{' '}
        <Agency alert={alert} />.
      </p>
      <div className="alert-card-acts">
        {may('alerts.acknowledge') && (
          <Button type="primary" size="large" onClick={() => setAsked(true)}>
            I have seen this
          </Button>
        )}
        {alert.certificateId !== null && (
          <Link className="button" to={paths.portalCertificate(alert.certificateId)}>
            Certificate
          </Link>
        )}
      </div>
      <SeenDialog alert={alert} isOpen={isAsked} onClose={() => setAsked(false)} />
    </article>
  )
}
