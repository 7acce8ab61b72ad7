import { useInfiniteQuery, useQuery } from '@tanstack/react-query'
import { ANALYTE_NAMES, type AnalyteCode } from '@weirlight/shared/contracts'
import { useFilters } from '../../../lib'
import { Box, FilterBar, FilterDay, FilterSelect } from '../../../ui'
import { usualForm } from '../../results'
import { NO_FILTERS, ownResultPages, utilityQuery } from '../api/portal-queries'
import { OwnResultPages } from './own-results'
import { OwnTrend } from './own-trend'

const ANALYTES = Object.entries(ANALYTE_NAMES).map(([value, label]) => ({ value, label }))
const isAnalyte = (code: string): code is AnalyteCode => code in ANALYTE_NAMES

/** Our released results, newest first; a point and an analyte together give the trend. */
export function ResultsOfOurs() {
  const [filters, change, clear] = useFilters(NO_FILTERS)
  const points = useQuery(utilityQuery).data?.points ?? []
  const point = points.find((each) => each.id === filters.pointId)
  const { analyte } = filters
  const query = useInfiniteQuery(ownResultPages(filters))
  const newest = query.data?.pages[0]?.items[0]
  return (
    <>
      <FilterBar onClear={clear}>
        <FilterSelect
          label="Point"
          value={filters.pointId}
          onChange={(pointId) => change({ pointId })}
          options={points.map((each) => ({ value: each.id, label: each.name }))}
        />
        <FilterSelect
          label="Analyte"
          value={analyte}
          onChange={(chosen) => change({ analyte: chosen })}
          options={ANALYTES}
        />
        <FilterDay label="Collected from" value={filters.from} onChange={(from) => change({ from })} />
        <FilterDay label="to" value={filters.to} onChange={(to) => change({ to })} />
      </FilterBar>
      <div className="stack">
        {filters.pointId !== '' && isAnalyte(analyte) && (
          <OwnTrend
            pointId={filters.pointId}
            pointName={point?.name}
            analyte={analyte}
            form={newest?.form ?? usualForm(analyte)}
          />
        )}
        <Box>
          <OwnResultPages query={query} />
        </Box>
        {(filters.pointId === '' || analyte === '') && (
          <p className="note">Choose a point and an analyte to see the trend.</p>
        )}
      </div>
    </>
  )
}
