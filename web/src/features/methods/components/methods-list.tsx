import { useQuery } from '@tanstack/react-query'
import { determinationName } from '@weirlight/shared/contracts'
import { asProblem, paths } from '../../../lib'
import { DataTable, Failed, StatusTag, type Column } from '../../../ui'
import { methodsQuery, type MethodRow } from '../api/method-queries'

const IN_USE = { word: 'In use', shape: 'disc', tone: 'meets' } as const
const NOT_IN_USE = { word: 'Not in use here', shape: 'ring', tone: 'quiet' } as const
export const methodMark = (method: Pick<MethodRow, 'active'>) => (method.active ? IN_USE : NOT_IN_USE)

const COLUMNS: Column<MethodRow>[] = [
  { key: 'title', title: 'Method', text: (row) => row.title },
  { key: 'what', title: 'Determines', text: (row) => determinationName(row.analyte, row.form) },
  { key: 'state', title: 'State', onPhone: 'corner', cell: (row) => <StatusTag mark={methodMark(row)} /> },
  { key: 'nm', title: 'Read at', unit: 'nm', kind: 'number', text: (row) => String(row.wavelengthNm) },
  {
    key: 'force',
    title: 'Calibrations',
    unit: 'in force',
    kind: 'number',
    text: (row) => String(row.calibrationsInForce),
    wrap: (row, aligned) =>
      row.active && row.calibrationsInForce === 0 ? <span className="caution">none</span> : aligned,
  },
  {
    key: 'waiting',
    title: 'Waiting',
    unit: 'samples',
    kind: 'number',
    text: (row) => String(row.determinationsWaiting),
  },
  { key: 'edition', title: 'Edition', text: (row) => row.edition, isSecondary: true },
]

export function MethodsList() {
  const query = useQuery(methodsQuery)
  if (query.isError && !query.data)
    return <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
  return (
    <DataTable
      label="Methods"
      rows={query.data?.items}
      columns={COLUMNS}
      rowKey={(row) => row.id}
      rowTo={(row) => paths.method(row.id)}
      empty={{ title: 'No method is recorded', text: 'The catalogue is loaded by a command of the server.' }}
    />
  )
}
