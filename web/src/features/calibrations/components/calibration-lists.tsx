import { useInfiniteQuery, useQuery, type UseQueryResult } from '@tanstack/react-query'
import { STATE_MARKS } from '@weirlight/shared/states'
import type { ReactNode } from 'react'
import { asProblem, byClock, paths, useFilters, useLaboratoryTime } from '../../../lib'
import {
  Box,
  Clock,
  DataTable,
  Failed,
  FilterBar,
  FilterSelect,
  Since,
  StatusTag,
  type Column,
} from '../../../ui'
import {
  calibrationPages,
  calibrationsInState,
  methodsQuery,
  type CalibrationRow,
  type CalibrationState,
} from '../api/calibration-queries'
import { decimals, significant } from '../draft/number-texts'
import './calibrations.css'

const NUMBER: Column<CalibrationRow> = {
  key: 'number',
  title: 'Calibration',
  text: (row) => row.number,
  isNarrow: true,
}
const METHOD: Column<CalibrationRow> = { key: 'method', title: 'Method', text: (row) => row.methodTitle }
const INSTRUMENT: Column<CalibrationRow> = {
  key: 'instrument',
  title: 'Instrument and cell',
  cell: (row) => (
    <>
      {row.instrumentName} <span className="quiet nowrap">· {row.cellPathCm} cm</span>
    </>
  ),
}
const SLOPE: Column<CalibrationRow> = {
  key: 'slope',
  title: 'Slope',
  unit: 'A per mg/L',
  kind: 'number',
  text: (row) => significant(row.slope, 4),
}
const CORRELATION: Column<CalibrationRow> = {
  key: 'r',
  title: 'r',
  kind: 'number',
  text: (row) => decimals(row.correlation, 6),
}
const PREPARED: Column<CalibrationRow> = {
  key: 'by',
  title: 'Prepared by',
  text: (row) => row.preparedBy.name,
}
const CRITERIA: Column<CalibrationRow> = {
  key: 'criteria',
  title: 'Criteria',
  cell: (row) =>
    row.slope === null ? null : row.criteriaFailed === 0 ? (
      <StatusTag mark={{ word: 'all met', shape: 'disc', tone: 'meets' }} />
    ) : (
      <StatusTag mark={{ word: `${row.criteriaFailed} not met`, shape: 'triangle', tone: 'above' }} />
    ),
}
const STATE: Column<CalibrationRow> = {
  key: 'state',
  title: 'State',
  onPhone: 'corner',
  cell: (row) => <StatusTag mark={STATE_MARKS.calibration[row.state]} />,
}
const LEFT: Column<CalibrationRow> = {
  key: 'left',
  title: 'In force',
  cell: (row) => (row.validUntil ? <Clock dueAt={row.validUntil} soonHours={72} /> : 'until replaced'),
}
const SUBMITTED: Column<CalibrationRow> = {
  key: 'submitted',
  title: 'Submitted',
  cell: (row) => (row.submittedAt ? <Since at={row.submittedAt} /> : null),
}

interface SectionProps {
  title: string
  query: UseQueryResult<{ items: CalibrationRow[] }, Error>
  columns: readonly Column<CalibrationRow>[]
  empty: { title: string; text?: string }
  isHiddenWhenEmpty?: boolean
  order?: (rows: CalibrationRow[]) => CalibrationRow[]
}

function Section({
  title,
  query,
  columns,
  empty,
  isHiddenWhenEmpty = false,
  order,
}: SectionProps): ReactNode {
  const rows = query.data?.items
  if (isHiddenWhenEmpty && (!rows || rows.length === 0)) return null
  return (
    <Box title={rows ? `${title}: ${rows.length}` : title}>
      {query.isError && !rows ? (
        <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
      ) : (
        <DataTable
          label={title}
          rows={rows && order ? order(rows) : rows}
          columns={columns}
          rowKey={(row) => row.id}
          rowTo={(row) => paths.calibration(row.id)}
          empty={empty}
        />
      )}
    </Box>
  )
}

export const calibrationColumns = {
  NUMBER,
  METHOD,
  INSTRUMENT,
  SLOPE,
  CORRELATION,
  PREPARED,
  CRITERIA,
  SUBMITTED,
}

/** Waiting for a signature, oldest first; shown to those who sign on Review too. */
export function CalibrationsToSign({ isHiddenWhenEmpty = false }: { isHiddenWhenEmpty?: boolean }) {
  return (
    <Section
      title="Waiting for signature"
      query={useQuery(calibrationsInState('submitted'))}
      columns={[NUMBER, METHOD, INSTRUMENT, CRITERIA, SLOPE, CORRELATION, PREPARED, SUBMITTED]}
      empty={{ title: 'No calibration waits for a signature' }}
      isHiddenWhenEmpty={isHiddenWhenEmpty}
      order={(rows) => byClock(rows, (row) => row.submittedAt)}
    />
  )
}

export function CalibrationsInForce() {
  return (
    <Section
      title="In force"
      query={useQuery(calibrationsInState('in-force'))}
      columns={[METHOD, INSTRUMENT, NUMBER, LEFT, SLOPE, CORRELATION, PREPARED]}
      empty={{
        title: 'No calibration is in force',
        text: 'Until one is signed, no batch can be opened.',
      }}
      order={(rows) =>
        rows.toSorted(
          (a, b) =>
            a.methodTitle.localeCompare(b.methodTitle) ||
            a.instrumentName.localeCompare(b.instrumentName) ||
            Number(a.cellPathCm) - Number(b.cellPathCm),
        )
      }
    />
  )
}

export function CalibrationDrafts() {
  return (
    <Section
      title="Drafts"
      query={useQuery(calibrationsInState('draft'))}
      columns={[NUMBER, METHOD, INSTRUMENT, PREPARED]}
      empty={{ title: 'No draft is open' }}
      isHiddenWhenEmpty
    />
  )
}

export function CalibrationsSentBack() {
  return (
    <Section
      title="Sent back"
      query={useQuery(calibrationsInState('rejected'))}
      columns={[NUMBER, METHOD, INSTRUMENT, PREPARED, SUBMITTED]}
      empty={{ title: 'None was sent back' }}
      isHiddenWhenEmpty
    />
  )
}

const STATES: { value: CalibrationState; label: string }[] = (
  ['draft', 'submitted', 'in-force', 'expired', 'replaced', 'invalidated', 'rejected'] as const
).map((value) => ({ value, label: STATE_MARKS.calibration[value].word }))

/** Every calibration there was, newest first. */
export function AllCalibrations() {
  const [filters, change, clear] = useFilters({ state: '', methodId: '' })
  const methods = useQuery(methodsQuery)
  const { day } = useLaboratoryTime()
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
        label="All calibrations"
        query={useInfiniteQuery(calibrationPages(filters))}
        columns={[
          NUMBER,
          STATE,
          METHOD,
          INSTRUMENT,
          SLOPE,
          CORRELATION,
          PREPARED,
          {
            key: 'until',
            title: 'Until',
            isNarrow: true,
            text: (row) => (row.validUntil ? day(row.validUntil) : null),
          },
        ]}
        rowKey={(row) => row.id}
        rowTo={(row) => paths.calibration(row.id)}
        empty={{ title: 'No calibration fits', text: 'Clear the filters to see all of them.' }}
      />
    </Box>
  )
}
