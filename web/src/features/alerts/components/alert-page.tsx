import { useQuery } from '@tanstack/react-query'
import { showUnit } from '@weirlight/shared/contracts'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Link } from 'react-router-dom'
import { paths, useCan, useLaboratoryTime } from '../../../lib'
import {
  Bar,
  Box,
  Clock,
  Columns,
  KeyValues,
  Loaded,
  MarginPage,
  NumberWithStory,
  StatusTag,
  Strip,
} from '../../../ui'
import { DeliveriesTable } from '../../mail'
import { shownNumber } from '../../results'
import { alertQuery, type AlertView } from '../api/alert-queries'
import { isAnswered, limitKindWords, overWhat, ruleWords, whatWasFound } from '../alert-words'
import { AlertActions } from './alert-actions'
import { EarlierResults } from './earlier-results'
import { LawClocks } from './law-clocks'
import './alerts.css'

const LIST = { to: paths.alerts, label: 'Alerts' }

/** One alert, for the laboratory. */
export function AlertById({ id }: { id: string }) {
  return (
    <Loaded query={useQuery(alertQuery(id))} skeleton="page" what="alert" back={LIST}>
      {(alert) => <AlertOnPage alert={alert} />}
    </Loaded>
  )
}

function AlertOnPage({ alert }: { alert: AlertView }) {
  const may = useCan()
  const { at } = useLaboratoryTime()
  const failed = alert.deliveries.filter((mail) => mail.state === 'failed')
  return (
    <MarginPage
      title={`Alert ${alert.number}`}
      subtitle={`${alert.clientName}, ${alert.pointName}`}
      back={LIST}
      state={<StatusTag mark={STATE_MARKS.alert[alert.state]} />}
      facts={[
        !isAnswered(alert) &&
          alert.answerDueAt !== null && {
            term: 'The client’s answer',
            detail: <Clock dueAt={alert.answerDueAt} />,
          },
        {
          term: 'Client',
          detail: may('clients.read') ? (
            <Link to={paths.client(alert.clientId)}>{alert.clientName}</Link>
          ) : (
            alert.clientName
          ),
        },
        {
          term: 'Sample',
          detail: may('samples.read') ? (
            <Link to={paths.sample(alert.sampleId)}>{alert.sampleNumber}</Link>
          ) : (
            alert.sampleNumber
          ),
        },
        { term: 'Collected', detail: at(alert.collectedAt) },
        { term: 'Released', detail: at(alert.releasedAt) },
        { term: 'Alert raised', detail: at(alert.raisedAt) },
        { term: 'First mail left', detail: alert.notifiedAt ? at(alert.notifiedAt) : 'not yet' },
        {
          term: 'Primacy agency of the client',
          detail: <Agency alert={alert} />,
        },
      ]}
      foldLabel="Client, times and agency"
      notes={[alert.caution]}
      bar={<Bar lead={<h2>{whatWasFound(alert)}</h2>} actions={<AlertActions alert={alert} />} />}
    >
      {failed.length > 0 && (
        <Strip
          tone="above"
          title="Not delivered"
          action={
            may('mail.read') && (
              <Link className="button" to={paths.settingsMail}>
                See outgoing mail
              </Link>
            )
          }
        >
          {failed.map((mail) => mail.to).join(', ')} could not be reached by mail. Tell them by telephone.
        </Strip>
      )}
      <Ending alert={alert} />
      <Columns
        side={
          <>
            <Answer alert={alert} />
            <LawClocks alert={alert} />
          </>
        }
      >
        <Box title="What was found">
          <KeyValues items={foundItems(alert)} />
          <p className="note clock-caution">{ruleWords(alert.decisionRule)}</p>
        </Box>
        <Box title="Who was told">
          <DeliveriesTable deliveries={alert.deliveries} label="Messages of this alert" />
        </Box>
        <EarlierResults alert={alert} />
      </Columns>
      <p className="note lines-end">{alert.caution}</p>
    </MarginPage>
  )
}

export function Agency({ alert }: { alert: Pick<AlertView, 'agencyName' | 'agencyPhone'> }) {
  return (
    <>
      {alert.agencyName}, <a href={`tel:${alert.agencyPhone.replaceAll(' ', '')}`}>{alert.agencyPhone}</a>
    </>
  )
}

function foundItems(alert: AlertView) {
  const uncertainty = alert.uncertaintyText ? `, U ${alert.uncertaintyText} (k = 2)` : ''
  return [
    {
      term: 'Result',
      detail: (
        <>
          <NumberWithStory
            resultId={alert.resultId}
            text={shownNumber(alert.text)}
            unit={showUnit(alert.unit)}
          />
          {uncertainty}
        </>
      ),
    },
    {
      term: 'Finding',
      detail: (
        <StatusTag mark={{ word: 'above', shape: 'triangle', tone: 'above' }}>{overWhat(alert)}</StatusTag>
      ),
    },
    { term: 'Limit', detail: alert.limitName },
    { term: 'Kind of limit', detail: limitKindWords(alert.limitKind) },
    { term: 'Source', detail: alert.limitSource },
  ]
}

function Answer({ alert }: { alert: AlertView }) {
  const { at } = useLaboratoryTime()
  return (
    <Box title="The client’s answer">
      {alert.acknowledgedAt === null ? (
        <p className="quiet">
          {isAnswered(alert) ? 'The client did not answer.' : 'Nobody of the client has answered yet.'}
        </p>
      ) : (
        <>
          <p>
            Seen by <span className="strong">{alert.acknowledgedBy?.name ?? 'the client'}</span>,{' '}
            {at(alert.acknowledgedAt)}.
          </p>
          {alert.acknowledgement !== '' && <p className="said">{alert.acknowledgement}</p>}
        </>
      )}
    </Box>
  )
}

function Ending({ alert }: { alert: AlertView }) {
  const { at } = useLaboratoryTime()
  if (alert.closedAt === null) return null
  const isCancelled = alert.state === 'cancelled'
  return (
    <Strip tone={isCancelled ? 'caution' : 'quiet'} title={isCancelled ? 'Cancelled' : 'Closed'}>
      {alert.closedBy?.name ?? 'The laboratory'}, {at(alert.closedAt)}: {alert.closingNote}
    </Strip>
  )
}
