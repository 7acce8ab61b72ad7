import { useInfiniteQuery, useQuery } from '@tanstack/react-query'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Link } from 'react-router-dom'
import { paths, useCan, useFilters, useLaboratoryTime } from '../../../lib'
import { Clock, DataTable, FilterBar, FilterSelect, FilterText, StatusTag, type Column } from '../../../ui'
import { clientQuery, clientsQuery } from '../../clients'
import { samplePages, type SampleRow, type SampleState } from '../api/sample-queries'
import { PURPOSE_WORDS } from '../sample-words'
import { DeterminationNames } from './determination-names'

const STATES = (
  [
    'expected',
    'received',
    'accepted',
    'accepted-with-qualification',
    'in-analysis',
    'reported',
    'rejected',
    'disposed',
  ] as const satisfies SampleState[]
).map((value) => ({ value, label: STATE_MARKS.sample[value].word }))

/** Every sample, newest first. */
export function SampleRegister() {
  const [filters, change, clear] = useFilters({ state: '', clientId: '', pointId: '', number: '' })
  const may = useCan()
  const { at } = useLaboratoryTime()
  const clients = useQuery(clientsQuery)
  const client = useQuery({ ...clientQuery(filters.clientId), enabled: filters.clientId !== '' })
  const columns: Column<SampleRow>[] = [
    { key: 'number', title: 'Sample', isNarrow: true, text: (row) => row.number },
    {
      key: 'state',
      title: 'State',
      onPhone: 'corner',
      cell: (row) => <StatusTag mark={STATE_MARKS.sample[row.state]} />,
    },
    {
      key: 'holding',
      title: 'Holding time',
      isNarrow: true,
      cell: (row) =>
        row.holding ? (
          <span title={row.holding.rule}>
            <Clock dueAt={row.holding.dueAt} soonHours={24} />
          </span>
        ) : (
          <span className="quiet">none running</span>
        ),
    },
    {
      key: 'point',
      title: 'Point and client',
      cell: (row) => (
        <div className="wide-cell">
          {row.pointName}{' '}
          <span className="quiet">
            {row.pointCode} · {row.clientName}
          </span>
        </div>
      ),
    },
    { key: 'what', title: 'Determinations', cell: (row) => <DeterminationNames of={row.determinations} /> },
    { key: 'purpose', title: 'Purpose', text: (row) => PURPOSE_WORDS[row.purpose] },
    {
      key: 'collected',
      title: 'Collected',
      isNarrow: true,
      isSecondary: true,
      text: (row) => at(row.collectedAt),
    },
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
          onChange={(clientId) => change({ clientId, pointId: '' })}
          options={(clients.data?.items ?? []).map((row) => ({ value: row.id, label: row.name }))}
        />
        {filters.clientId !== '' && (
          <FilterSelect
            label="Point"
            value={filters.pointId}
            onChange={(pointId) => change({ pointId })}
            options={(client.data?.points ?? []).map((point) => ({
              value: point.id,
              label: `${point.code} · ${point.name}`,
            }))}
          />
        )}
        <FilterText
          label="Number"
          value={filters.number}
          onChange={(number) => change({ number })}
          placeholder="S-26-…"
        />
      </FilterBar>
      <DataTable
        label="Samples"
        query={useInfiniteQuery(samplePages(filters))}
        columns={columns}
        rowKey={(row) => row.id}
        rowTo={(row) => paths.sample(row.id)}
        empty={{
          title: 'No sample fits',
          text: 'Clear the filters to see all of them.',
          action: may('samples.receive') && (
            <Link className="button" to={paths.receive}>
              Receive a sample
            </Link>
          ),
        }}
      />
    </>
  )
}
