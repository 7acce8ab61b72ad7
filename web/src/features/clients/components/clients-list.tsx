import { useQuery } from '@tanstack/react-query'
import { asProblem, paths, useFilters } from '../../../lib'
import { DataTable, Failed, FilterBar, FilterText, StatusTag } from '../../../ui'
import { clientsQuery, type ClientRow } from '../api/client-queries'
import { activeMark } from '../client-words'

const NO_CONTACT = { word: 'nobody', shape: 'triangle', tone: 'above' } as const

export function ClientsList() {
  const [filters, change, clear] = useFilters({ find: '' })
  const query = useQuery(clientsQuery)
  if (query.isError && !query.data)
    return <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
  return (
    <>
      <FilterBar onClear={clear}>
        <FilterText
          label="Name or code"
          value={filters.find}
          onChange={(find) => change({ find })}
          width={220}
        />
      </FilterBar>
      <DataTable
        label="Clients"
        rows={query.data?.items.filter((row) => fits(row, filters.find))}
        columns={[
          { key: 'code', title: 'Code', text: (row) => row.code },
          { key: 'name', title: 'Client', text: (row) => row.name },
          { key: 'programme', title: 'Programme', text: (row) => row.programmeName },
          {
            key: 'points',
            title: 'Sampling points',
            kind: 'number',
            text: (row) => String(row.pointCount),
          },
          {
            key: 'alerts',
            title: 'Told of alerts',
            cell: (row) =>
              row.alertContactCount === 0 ? (
                <StatusTag mark={NO_CONTACT} />
              ) : row.alertContactCount === 1 ? (
                '1 person'
              ) : (
                `${row.alertContactCount} people`
              ),
          },
          {
            key: 'state',
            title: 'State',
            isSecondary: true,
            cell: (row) => <StatusTag mark={activeMark(row)} />,
          },
        ]}
        rowKey={(row) => row.id}
        rowTo={(row) => paths.client(row.id)}
        empty={{ title: 'No client fits', text: 'Clear the filter, or add one.' }}
      />
    </>
  )
}

function fits(row: ClientRow, find: string): boolean {
  const wanted = find.trim().toLowerCase()
  return wanted === '' || `${row.code} ${row.name}`.toLowerCase().includes(wanted)
}
