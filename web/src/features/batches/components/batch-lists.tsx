import { useInfiniteQuery, useQuery } from '@tanstack/react-query'
import { STATE_MARKS } from '@weirlight/shared/states'
import { asProblem, byClock, paths, useFilters, useLaboratoryTime } from '../../../lib'
import { Box, Clock, DataTable, Failed, FilterBar, FilterSelect, StatusTag, type Column } from '../../../ui'
import { methodsQuery } from '../../calibrations'
import { batchesInState, batchPages, type BatchRow, type BatchState } from '../api/batch-queries'

const NUMBER: Column<BatchRow> = {
  key: 'number',
  title: 'Batch',
  text: (row) => row.number,
  isNarrow: true,
}
const METHOD: Column<BatchRow> = { key: 'method', title: 'Method', text: (row) => row.methodTitle }
const READ: Column<BatchRow> = {
  key: 'read',
  title: 'Read',
  kind: 'number',
  text: (row) => `${row.read} of ${row.positions}`,
}
const SAMPLES: Column<BatchRow> = {
  key: 'samples',
  title: 'Samples',
  kind: 'number',
  text: (row) => String(row.samples),
}
const ABOVE: Column<BatchRow> = {
  key: 'above',
  title: 'Above a limit',
  cell: (row) =>
    row.aboveLimit === 0 ? (
      <span className="quiet">none</span>
    ) : (
      <StatusTag mark={STATE_MARKS.verdict.above}>{row.aboveLimit}</StatusTag>
    ),
}
const FINDINGS: Column<BatchRow> = {
  key: 'findings',
  title: 'Findings',
  cell: (row) =>
    row.findings === 0 ? (
      <span className="quiet">none</span>
    ) : (
      <StatusTag mark={{ word: 'findings', shape: 'diamond', tone: 'caution' }}>{row.findings}</StatusTag>
    ),
}
const STATE: Column<BatchRow> = {
  key: 'state',
  title: 'State',
  onPhone: 'corner',
  cell: (row) => <StatusTag mark={STATE_MARKS.batch[row.state]} />,
}
const ANALYST: Column<BatchRow> = { key: 'by', title: 'Analyst', text: (row) => row.openedBy.name }
const CALIBRATION: Column<BatchRow> = {
  key: 'calibration',
  title: 'Calibration',
  text: (row) => row.calibrationNumber,
}
const REVIEW: Column<BatchRow> = {
  key: 'due',
  title: 'Review',
  cell: (row) => row.reviewDueAt && <Clock dueAt={row.reviewDueAt} />,
}

/** Submitted batches, the one whose review clock runs out first at the head. */
export function BatchesToReview({ rowTo }: { rowTo: (id: string) => string }) {
  const query = useQuery(batchesInState('submitted'))
  const rows = query.data?.items
  if (query.isError && !rows)
    return <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
  return (
    <Box title={rows ? `Batches to review: ${rows.length}` : 'Batches to review'}>
      <DataTable
        label="Batches to review"
        rows={rows && byClock(rows, (row) => row.reviewDueAt)}
        columns={[NUMBER, REVIEW, METHOD, SAMPLES, ABOVE, FINDINGS, ANALYST, CALIBRATION]}
        rowKey={(row) => row.id}
        rowTo={(row) => rowTo(row.id)}
        empty={{ title: 'Nothing waits for review', text: 'A batch appears here when it is submitted.' }}
      />
    </Box>
  )
}

/** Where somebody is reading, or was sent back to read again. */
export function BatchesAtTheBench() {
  const open = useQuery(batchesInState('open'))
  const returned = useQuery(batchesInState('returned'))
  const rows = open.data && returned.data && [...returned.data.items, ...open.data.items]
  const error = open.error ?? returned.error
  if (error && !rows) {
    const retry = () => void Promise.all([open.refetch(), returned.refetch()])
    return <Failed problem={asProblem(error)} retry={retry} />
  }
  return (
    <Box title={rows ? `At the bench: ${rows.length}` : 'At the bench'}>
      <DataTable
        label="Batches at the bench"
        rows={rows}
        columns={[NUMBER, STATE, METHOD, READ, SAMPLES, ABOVE, ANALYST, CALIBRATION]}
        rowKey={(row) => row.id}
        rowTo={(row) => paths.batch(row.id)}
        empty={{ title: 'No batch is being read', text: 'Make one from waiting determinations.' }}
      />
    </Box>
  )
}

const STATES: { value: BatchState; label: string }[] = (
  ['open', 'submitted', 'returned', 'reviewed', 'released'] as const
).map((value) => ({ value, label: STATE_MARKS.batch[value].word }))

export function AllBatches() {
  const [filters, change, clear] = useFilters({ state: '', methodId: '' })
  const methods = useQuery(methodsQuery)
  const { at } = useLaboratoryTime()
  return (
    <Box title="All, newest first">
      <FilterBar onClear={clear}>
        <FilterSelect
          label="State"
          value={filters.state}
          onChange={(state) => change({ state })}
          options={STATES}
        />
        <FilterSelect
          label="Method"
          value={filters.methodId}
          onChange={(methodId) => change({ methodId })}
          options={(methods.data?.items ?? []).map((method) => ({ value: method.id, label: method.title }))}
        />
      </FilterBar>
      <DataTable
        label="All batches"
        query={useInfiniteQuery(batchPages(filters))}
        columns={[
          NUMBER,
          STATE,
          METHOD,
          SAMPLES,
          ABOVE,
          FINDINGS,
          ANALYST,
          { key: 'opened', title: 'Opened', isNarrow: true, text: (row) => at(row.openedAt) },
        ]}
        rowKey={(row) => row.id}
        rowTo={(row) => paths.batch(row.id)}
        empty={{ title: 'No batch fits', text: 'Clear the filters to see all of them.' }}
      />
    </Box>
  )
}
