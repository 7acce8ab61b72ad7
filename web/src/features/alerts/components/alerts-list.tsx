import { useInfiniteQuery, useQuery } from '@tanstack/react-query'
import { showUnit } from '@weirlight/shared/contracts'
import { STATE_MARKS } from '@weirlight/shared/states'
import { paths, useFilters, useLaboratoryTime } from '../../../lib'
import {
  Clock,
  DataTable,
  FilterBar,
  FilterSelect,
  NumberWithStory,
  Since,
  StatusTag,
  type Column,
} from '../../../ui'
import { shownNumber } from '../../results'
import { determinationName } from '@weirlight/shared/contracts'
import { alertPages, clientsQuery, type AlertRow } from '../api/alert-queries'
import { isAnswered } from '../alert-words'
import './alerts.css'

const STATES = (['raised', 'notified', 'acknowledged', 'closed', 'cancelled'] as const).map((value) => ({
  value,
  label: STATE_MARKS.alert[value].word,
}))

/** All alerts, newest first. */
export function AlertsList() {
  const [filters, change, clear] = useFilters({ state: '', clientId: '' })
  const clients = useQuery(clientsQuery)
  const { at } = useLaboratoryTime()
  const columns: Column<AlertRow>[] = [
    { key: 'number', title: 'Alert', isNarrow: true, text: (row) => row.number },
    {
      key: 'state',
      title: 'State',
      onPhone: 'corner',
      cell: (row) => <StatusTag mark={STATE_MARKS.alert[row.state]} />,
    },
    {
      key: 'point',
      title: 'Point',
      cell: (row) => (
        <>
          {row.pointName} <span className="alert-extra quiet">{row.clientName}</span>
        </>
      ),
    },
    { key: 'what', title: 'Determination', text: (row) => determinationName(row.analyte, row.form) },
    {
      key: 'text',
      title: 'Found',
      kind: 'number',
      text: (row) => shownNumber(row.text),
      wrap: (row, aligned) => (
        <NumberWithStory resultId={row.resultId} text={shownNumber(row.text)} unit={showUnit(row.unit)}>
          {aligned}
        </NumberWithStory>
      ),
    },
    { key: 'unit', title: 'Unit', isNarrow: true, onPhone: 'beside', text: (row) => showUnit(row.unit) },
    {
      key: 'limit',
      title: 'Limit',
      cell: (row) => (
        <>
          {row.limitValue} {row.limitUnit === row.unit ? '' : showUnit(row.limitUnit)}
          <span className="alert-extra quiet">{row.limitName}</span>
        </>
      ),
    },
    { key: 'raised', title: 'Raised', isNarrow: true, text: (row) => at(row.raisedAt) },
    { key: 'answer', title: 'Answer', cell: (row) => <Answer alert={row} /> },
  ]
  return (
    <>
      <FilterBar onClear={clear}>
        <FilterSelect
          label="State"
          value={filters.state}
          onChange={(state) => change({ state })}
          options={STATES}
        />
        <FilterSelect
          label="Client"
          value={filters.clientId}
          onChange={(clientId) => change({ clientId })}
          options={(clients.data?.items ?? []).map((client) => ({ value: client.id, label: client.name }))}
        />
      </FilterBar>
      <DataTable
        label="Alerts, newest first"
        query={useInfiniteQuery(alertPages(filters))}
        columns={columns}
        rowKey={(row) => row.id}
        rowTo={(row) => paths.alert(row.id)}
        empty={
          filters.state === '' && filters.clientId === ''
            ? { title: 'No alert was ever raised', text: 'No released result was above a limit so far.' }
            : { title: 'No alert fits', text: 'Clear the filters to see all of them.' }
        }
      />
    </>
  )
}

function Answer({ alert }: { alert: AlertRow }) {
  if (alert.acknowledgedAt !== null) {
    return (
      <span className="quiet">
        answered <Since at={alert.acknowledgedAt} />
      </span>
    )
  }
  if (isAnswered(alert)) return <span className="quiet">not answered</span>
  if (alert.answerDueAt !== null) return <Clock dueAt={alert.answerDueAt} />
  return <span className="quiet">not mailed yet</span>
}
