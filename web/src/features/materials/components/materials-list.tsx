import { useQuery } from '@tanstack/react-query'
import { ANALYTE_NAMES } from '@weirlight/shared/contracts'
import { asProblem, paths, useFilters, useLaboratoryTime } from '../../../lib'
import { DataTable, Failed, FilterBar, FilterSelect } from '../../../ui'
import { materialsQuery, type MaterialFilters } from '../api/material-queries'
import { KIND_WORDS, KINDS } from '../material-words'
import { materialColumns } from './material-columns'

const METALS = Object.entries(ANALYTE_NAMES).map(([value, label]) => ({ value, label }))

export function MaterialsList() {
  const [filters, change, clear] = useFilters({ kind: '', analyte: '', usable: '' })
  const { today } = useLaboratoryTime()
  const query = useQuery(materialsQuery(filters as MaterialFilters))
  return (
    <>
      <FilterBar onClear={clear}>
        <FilterSelect
          label="Kind"
          value={filters.kind}
          onChange={(kind) => change({ kind })}
          options={KINDS.map((value) => ({ value, label: KIND_WORDS[value] }))}
        />
        <FilterSelect
          label="Metal"
          value={filters.analyte}
          onChange={(analyte) => change({ analyte })}
          options={METALS}
        />
        <FilterSelect
          label="May be used"
          value={filters.usable}
          onChange={(usable) => change({ usable })}
          options={[{ value: 'yes', label: 'Today' }]}
          allLabel="Whether or not"
        />
      </FilterBar>
      {query.isError && !query.data ? (
        <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
      ) : (
        <DataTable
          label="Lots"
          rows={query.data?.items}
          columns={materialColumns(today())}
          rowKey={(row) => row.id}
          rowTo={(row) => paths.material(row.id)}
          empty={{ title: 'No lot fits', text: 'Clear the filters to see all of them, or record one.' }}
        />
      )}
    </>
  )
}
