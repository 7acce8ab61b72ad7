import { useQuery } from '@tanstack/react-query'
import { asProblem, paths, useLaboratoryTime } from '../../../lib'
import { DataTable, Failed, StatusTag } from '../../../ui'
import { instrumentsQuery } from '../api/instrument-queries'
import { instrumentMark } from '../instrument-words'

export function InstrumentsList() {
  const query = useQuery(instrumentsQuery)
  const { today } = useLaboratoryTime()
  if (query.isError && !query.data)
    return <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
  return (
    <DataTable
      label="Instruments"
      rows={query.data?.items}
      columns={[
        { key: 'number', title: 'Number', text: (row) => row.number },
        { key: 'name', title: 'Instrument', text: (row) => row.name },
        {
          key: 'state',
          title: 'State',
          onPhone: 'corner',
          cell: (row) => <StatusTag mark={instrumentMark(row, today())} />,
        },
        { key: 'due', title: 'Next check', text: (row) => row.nextCheckDueOn ?? 'none on record' },
        { key: 'where', title: 'Stands in', text: (row) => row.location },
        { key: 'kind', title: 'Kind', text: (row) => row.kind, isSecondary: true },
        { key: 'serial', title: 'Serial number', text: (row) => row.serial, isSecondary: true },
      ]}
      rowKey={(row) => row.id}
      rowTo={(row) => paths.instrument(row.id)}
      empty={{ title: 'No instrument is recorded', text: 'Add the spectrophotometers of the laboratory.' }}
    />
  )
}
