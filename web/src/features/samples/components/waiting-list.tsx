import { useQuery } from '@tanstack/react-query'
import { Link } from 'react-router-dom'
import { asProblem, byClock, paths, useCan, useFilters, useLaboratoryTime } from '../../../lib'
import { Bar, Clock, DataTable, Failed, StatusTag, type Column } from '../../../ui'
import { waitingQuery, type Waiting } from '../api/sample-queries'
import './samples.css'

const QUALIFIED = { word: 'with a qualification', shape: 'diamond', tone: 'caution' } as const

/** Determinations that wait for a batch, by method; what runs out first comes first. */
export function WaitingList() {
  const [filters, change] = useFilters({ method: '' })
  const may = useCan()
  const { at } = useLaboratoryTime()
  const query = useQuery(waitingQuery(filters.method))
  const all = useQuery(waitingQuery(''))
  const counts = all.data?.counts ?? query.data?.counts ?? []
  const chosen = counts.find((each) => each.methodId === filters.method)
  const columns: Column<Waiting>[] = [
    { key: 'sample', title: 'Sample', isNarrow: true, text: (row) => row.sampleNumber },
    {
      key: 'clock',
      title: 'Holding time',
      isNarrow: true,
      cell: (row) => (
        <span title={row.holding.rule}>
          <Clock dueAt={row.holding.dueAt} soonHours={24} />
        </span>
      ),
    },
    { key: 'method', title: 'Method', text: (row) => row.methodTitle },
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
    {
      key: 'collected',
      title: 'Collected',
      isNarrow: true,
      isSecondary: true,
      text: (row) => at(row.collectedAt),
    },
    {
      key: 'accepted',
      title: 'Accepted',
      cell: (row) =>
        row.sampleState === 'accepted-with-qualification' ? (
          <StatusTag mark={QUALIFIED} />
        ) : (
          <span className="quiet">yes</span>
        ),
    },
  ]
  if (query.isError && !query.data)
    return <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
  return (
    <>
      <div className="waiting-counts" role="group" aria-label="Method">
        <button
          type="button"
          className="button"
          aria-current={filters.method === ''}
          onClick={() => change({ method: '' })}
        >
          All methods
        </button>
        {counts.map((each) => (
          <button
            key={each.methodId}
            type="button"
            className="button"
            aria-current={filters.method === each.methodId}
            onClick={() => change({ method: each.methodId })}
          >
            {each.methodTitle} <span className="quiet">&nbsp;{each.waiting}</span>
          </button>
        ))}
      </div>
      {filters.method !== '' && (
        <Bar
          lead={
            chosen ? `${chosen.waiting} waiting for ${chosen.methodTitle}` : 'Nothing waits for this method.'
          }
          actions={
            may('batches.run') && (
              <Link className="button main" to={`${paths.newBatch}?method=${filters.method}`}>
                Make a batch
              </Link>
            )
          }
        />
      )}
      <DataTable
        label="Waiting determinations"
        rows={query.data && byClock(query.data.items, (row) => row.holding.dueAt)}
        columns={filters.method === '' ? columns : columns.filter((column) => column.key !== 'method')}
        rowKey={(row) => row.id}
        rowTo={(row) => paths.sample(row.sampleId)}
        empty={{
          title: 'Nothing waits for a batch',
          text: 'Determinations appear here once their sample is received and accepted.',
        }}
      />
    </>
  )
}
