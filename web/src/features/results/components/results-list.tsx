import { useInfiniteQuery } from '@tanstack/react-query'
import { ANALYTE_NAMES, showUnit, type AnalyteCode } from '@weirlight/shared/contracts'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Link } from 'react-router-dom'
import { paths, useCan, useFilters, useLaboratoryTime } from '../../../lib'
import { Bar, DataTable, NumberWithStory, StatusTag, Strip, type Column } from '../../../ui'
import { exportHref, NO_FILTERS, resultPages, type FormCode, type ResultRow } from '../api/result-queries'
import { determinationOf, findingOf, flagWords, shownNumber, usualForm } from '../result-words'
import { ResultsFilters, usePoints } from './results-filters'
import { TrendBox } from './trend-box'
import './results.css'

const isAnalyte = (code: string): code is AnalyteCode => code in ANALYTE_NAMES

/** Everything measured: filtered, drawn, exported. */
export function ResultsList() {
  const may = useCan()
  const [filters, change, clear] = useFilters(NO_FILTERS)
  const columns = useColumns()
  return (
    <>
      <Bar
        lead="Newest first. A number opens its story."
        actions={
          may('results.export') && (
            <>
              <a className="button" href={exportHref(filters, 'xlsx')} download>
                Export xlsx
              </a>
              <a className="button" href={exportHref(filters, 'csv')} download>
                Export csv
              </a>
            </>
          )
        }
      />
      <ResultsFilters filters={filters} change={change} clear={clear} />
      <div className="stack">
        <ChosenTrend pointId={filters.pointId} clientId={filters.clientId} analyte={filters.analyte} />
        <div>
          <DataTable
            label="Results, newest first"
            query={useInfiniteQuery(resultPages(filters))}
            columns={columns}
            rowKey={(row) => row.id}
            rowTo={(row) => paths.result(row.id)}
            empty={{ title: 'No result fits', text: 'Clear the filters to see all of them.' }}
          />
        </div>
      </div>
    </>
  )
}

function ChosenTrend({ pointId, clientId, analyte }: { pointId: string; clientId: string; analyte: string }) {
  const [{ form }, change] = useFilters({ form: '' })
  const point = usePoints(clientId).find((each) => each.id === pointId)
  if (pointId === '' && !isAnalyte(analyte)) return null
  if (pointId === '' || !isAnalyte(analyte)) {
    return (
      <Strip tone="quiet">
        {pointId === ''
          ? 'Choose a client and a point to see the trend.'
          : 'Choose an analyte to see the trend of this point.'}
      </Strip>
    )
  }
  return (
    <TrendBox
      pointId={pointId}
      pointName={point?.name ?? 'the chosen point'}
      analyte={analyte}
      form={form === '' ? usualForm(analyte) : (form as FormCode)}
      onForm={(chosen) => change({ form: chosen })}
    />
  )
}

function useColumns(): Column<ResultRow>[] {
  const { at } = useLaboratoryTime()
  return [
    { key: 'sample', title: 'Sample', isNarrow: true, text: (row) => row.sampleNumber },
    {
      key: 'collected',
      title: 'Collected',
      isNarrow: true,
      text: (row) => at(row.collectedAt),
    },
    {
      key: 'point',
      title: 'Point',
      cell: (row) => (
        <>
          {row.pointName} <span className="result-extra quiet">{row.clientName}</span>
        </>
      ),
    },
    {
      key: 'determination',
      title: 'Determination',
      cell: (row) => <span className="result-name">{determinationOf(row)}</span>,
    },
    {
      key: 'text',
      title: 'Result',
      kind: 'number',
      text: (row) => shownNumber(row.text),
      wrap: (row, aligned) => (
        <NumberWithStory resultId={row.id} text={shownNumber(row.text)} unit={showUnit(row.unit)}>
          {aligned}
        </NumberWithStory>
      ),
    },
    {
      key: 'uncertainty',
      title: 'U, k = 2',
      kind: 'number',
      onPhone: 'beside',
      text: (row) => (row.uncertaintyText === null ? null : plusMinus(row.uncertaintyText)),
    },
    { key: 'unit', title: 'Unit', isNarrow: true, onPhone: 'beside', text: (row) => showUnit(row.unit) },
    {
      key: 'finding',
      title: 'Finding',
      cell: (row) => {
        const finding = findingOf(row)
        const more = [row.limitName, ...flagWords(row.flags)].filter(Boolean)
        return (
          <>
            <StatusTag mark={finding.mark}>{finding.words}</StatusTag>
            {more.length > 0 && <span className="result-extra quiet">{more.join(' · ')}</span>}
          </>
        )
      },
    },
    {
      key: 'state',
      title: 'State',
      onPhone: 'corner',
      cell: (row) => <StatusTag mark={STATE_MARKS.result[row.state]} />,
    },
    {
      key: 'batch',
      title: 'Batch',
      isNarrow: true,
      isSecondary: true,
      cell: (row) => <Link to={paths.batch(row.batchId)}>{row.batchNumber}</Link>,
    },
  ]
}

const plusMinus = (text: string) => `± ${text.replace(/^±\s*/, '')}`
