import { useQuery } from '@tanstack/react-query'
import { ANALYTE_NAMES } from '@weirlight/shared/contracts'
import { STATE_MARKS } from '@weirlight/shared/states'
import { FilterBar, FilterDay, FilterSelect, FilterText } from '../../../ui'
import { clientPointsQuery, clientsQuery, methodsQuery, type ResultFilters } from '../api/result-queries'

const ANALYTES = Object.entries(ANALYTE_NAMES).map(([value, label]) => ({ value, label }))
const STATES = (['measured', 'reviewed', 'released', 'not-reported'] as const).map((value) => ({
  value,
  label: STATE_MARKS.result[value].word,
}))
const FINDINGS = [
  { value: 'above', label: 'Above a limit' },
  { value: 'below', label: 'Below its limit' },
]

interface ResultsFiltersProps {
  filters: ResultFilters
  change: (part: Partial<ResultFilters>) => void
  clear: () => void
}

export function ResultsFilters({ filters, change, clear }: ResultsFiltersProps) {
  const clients = useQuery(clientsQuery)
  const methods = useQuery(methodsQuery)
  const points = usePoints(filters.clientId)
  return (
    <FilterBar onClear={clear}>
      <FilterSelect
        label="Client"
        value={filters.clientId}
        // a point belongs to one client
        onChange={(clientId) => change({ clientId, pointId: '' })}
        options={(clients.data?.items ?? []).map((client) => ({ value: client.id, label: client.name }))}
      />
      {(filters.clientId !== '' || filters.pointId !== '') && (
        <FilterSelect
          label="Point"
          value={filters.pointId}
          onChange={(pointId) => change({ pointId })}
          options={
            points.length > 0
              ? points.map((point) => ({ value: point.id, label: `${point.code} ${point.name}` }))
              : [{ value: filters.pointId, label: 'the chosen point' }].filter((each) => each.value !== '')
          }
        />
      )}
      <FilterSelect
        label="Analyte"
        value={filters.analyte}
        onChange={(analyte) => change({ analyte })}
        options={ANALYTES}
      />
      <FilterSelect
        label="Method"
        value={filters.methodId}
        onChange={(methodId) => change({ methodId })}
        options={(methods.data?.items ?? []).map((method) => ({ value: method.id, label: method.title }))}
      />
      <FilterSelect
        label="Finding"
        value={filters.verdict}
        onChange={(verdict) => change({ verdict })}
        options={FINDINGS}
      />
      <FilterSelect
        label="State"
        value={filters.state}
        onChange={(state) => change({ state })}
        options={STATES}
      />
      <FilterDay label="Collected from" value={filters.from} onChange={(from) => change({ from })} />
      <FilterDay label="to" value={filters.to} onChange={(to) => change({ to })} />
      <FilterText
        label="Sample"
        value={filters.sample}
        onChange={(sample) => change({ sample })}
        placeholder="S-26-0…"
        width={120}
      />
    </FilterBar>
  )
}

export function usePoints(clientId: string) {
  const client = useQuery({ ...clientPointsQuery(clientId), enabled: clientId !== '' })
  return client.data?.points ?? []
}
