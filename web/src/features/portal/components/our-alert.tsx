import { useQuery } from '@tanstack/react-query'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Button } from 'antd'
import { useState } from 'react'
import { paths, useCan, useLaboratoryTime } from '../../../lib'
import { Box, Clock, KeyValues, Loaded, MarginPage, StatusTag, Strip } from '../../../ui'
import {
  Agency,
  alertQuery,
  EarlierResults,
  isAnswered,
  LawClocks,
  limitKindWords,
  overWhat,
  ruleWords,
  SeenDialog,
  whatWasFound,
  type AlertView,
} from '../../alerts'
import { DeliveriesTable } from '../../mail'
import './portal.css'

const LIST = { to: paths.portalAlerts, label: 'Our alerts' }

/** One alert of ours: what was found, what the law’s clocks say, and our answer. */
export function OurAlert({ id }: { id: string }) {
  return (
    <Loaded query={useQuery(alertQuery(id))} skeleton="page" what="alert" back={LIST}>
      {(alert) => <AlertOfOurs alert={alert} />}
    </Loaded>
  )
}

function AlertOfOurs({ alert }: { alert: AlertView }) {
  const may = useCan()
  const { at } = useLaboratoryTime()
  const [isAsked, setAsked] = useState(false)
  const mayAnswer = may('alerts.acknowledge', { clientId: alert.clientId }) && !isAnswered(alert)
  return (
    <MarginPage
      title={whatWasFound(alert)}
      subtitle={`${alert.pointName} · ${alert.number}`}
      back={LIST}
      state={<StatusTag mark={STATE_MARKS.alert[alert.state]} />}
    >
      <div className="stack">
        {alert.closedAt !== null && (
          <Strip tone="quiet" title={alert.state === 'cancelled' ? 'Cancelled' : 'Closed'}>
            {at(alert.closedAt)}: {alert.closingNote}
          </Strip>
        )}
        <Box>
          <KeyValues
            items={[
              {
                term: 'Finding',
                detail: (
                  <StatusTag mark={{ word: 'above', shape: 'triangle', tone: 'above' }}>
                    {overWhat(alert)}
                  </StatusTag>
                ),
              },
              alert.uncertaintyText !== null && {
                term: 'Uncertainty, k = 2',
                detail: alert.uncertaintyText,
              },
              { term: 'Limit', detail: `${alert.limitName} (${limitKindWords(alert.limitKind)})` },
              { term: 'Source', detail: alert.limitSource },
              { term: 'Sample', detail: alert.sampleNumber },
              { term: 'Collected', detail: at(alert.collectedAt) },
              { term: 'Released', detail: at(alert.releasedAt) },
              { term: 'Agency', detail: <Agency alert={alert} /> },
              alert.acknowledgedAt !== null && {
                term: 'Seen',
                detail: `${at(alert.acknowledgedAt)} by ${alert.acknowledgedBy?.name ?? 'us'}`,
              },
              alert.acknowledgement !== '' && { term: 'Our note', detail: alert.acknowledgement },
            ]}
          />
          <p className="note clock-caution">{ruleWords(alert.decisionRule)}</p>
          <p className="note clock-caution">{alert.caution}</p>
          {mayAnswer && (
            <>
              {alert.answerDueAt !== null && (
                <p className="own-answer">
                  Your answer: <Clock dueAt={alert.answerDueAt} />
                </p>
              )}
              <div className="alert-card-acts">
                <Button type="primary" size="large" onClick={() => setAsked(true)}>
                  I have seen this
                </Button>
              </div>
            </>
          )}
        </Box>
        <EarlierResults alert={alert} height={190} />
        <LawClocks alert={alert} />
        <Box title="Who of ours was told">
          <DeliveriesTable deliveries={alert.deliveries} label="Messages of this alert" />
        </Box>
      </div>
      <SeenDialog alert={alert} isOpen={isAsked} onClose={() => setAsked(false)} />
    </MarginPage>
  )
}
