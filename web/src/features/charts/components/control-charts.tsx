import { useQuery } from '@tanstack/react-query'
import { controlChart, controlNumbers } from '@weirlight/shared/charts'
import { useMemo } from 'react'
import { Link, useNavigate } from 'react-router-dom'
import { paths, useFilters, useLaboratoryTime } from '../../../lib'
import { Box, DataTable, Empty, Loaded, StatusTag, Strip, type Column } from '../../../ui'
import { Chart, useChartColours } from '../../../ui/chart'
import {
  controlChartQuery,
  methodsQuery,
  type ControlChartView,
  type ControlKind,
} from '../api/chart-queries'
import { chartWords, signalLines, type SignalLine } from '../signal-lines'
import './charts.css'

const KINDS: readonly { value: ControlKind; label: string }[] = [
  { value: 'verification', label: 'Verification standards' },
  { value: 'control', label: 'Control samples' },
  { value: 'method-blank', label: 'Method blanks' },
  { value: 'duplicate', label: 'Duplicates' },
  { value: 'slope', label: 'Slopes of calibrations' },
]

/** One control chart at a time, chosen by method and kind; the choice stands in the address. */
export function ControlCharts() {
  const [filters, change] = useFilters({ methodId: '', kind: 'control' })
  const methods = useQuery(methodsQuery)
  const items = methods.data?.items ?? []
  const methodId = filters.methodId === '' ? (items[0]?.id ?? '') : filters.methodId
  const kind = KINDS.find((each) => each.value === filters.kind)?.value ?? 'control'
  const found = useQuery({ ...controlChartQuery(methodId, kind), enabled: methodId !== '' })
  return (
    <>
      <search className="filters no-print">
        <label>
          Method
          <select
            className="field"
            value={methodId}
            onChange={(event) => change({ methodId: event.target.value })}
          >
            {items.map((method) => (
              <option key={method.id} value={method.id}>
                {method.title}
              </option>
            ))}
          </select>
        </label>
        <label>
          What is charted
          <select className="field" value={kind} onChange={(event) => change({ kind: event.target.value })}>
            {KINDS.map((each) => (
              <option key={each.value} value={each.value}>
                {each.label}
              </option>
            ))}
          </select>
        </label>
      </search>
      {methods.isSuccess && items.length === 0 ? (
        <Empty title="No method is set up" />
      ) : (
        <Loaded query={found}>{(view) => <ChartOnPage chart={view} />}</Loaded>
      )}
    </>
  )
}

function ChartOnPage({ chart }: { chart: ControlChartView }) {
  const colours = useChartColours()
  const navigate = useNavigate()
  const { day } = useLaboratoryTime()
  const option = useMemo(
    () =>
      controlChart({
        ...chart,
        points: chart.points.map((point) => ({
          label: point.label,
          value: point.value,
          signals: point.signals,
        })),
        colours,
      }),
    [chart, colours],
  )
  const hasBatches = chart.points.some((point) => point.batchId !== null)
  const first = chart.points[0]
  const last = chart.points.at(-1)
  return (
    <div className="stack">
      <Box title={chart.title}>
        {first && last && (
          <p className="note">
            {day(first.at)} to {day(last.at)}. {chartWords(chart)}
          </p>
        )}
        <Chart
          option={option}
          summary={chartWords(chart)}
          height={340}
          onPick={({ dataIndex }) => {
            const batchId = chart.points[dataIndex]?.batchId
            if (batchId) void navigate(paths.batch(batchId))
          }}
          caption={`Filled diamond: a signal.${hasBatches ? ' A point opens its batch.' : ''}`}
        />
        {chart.points.length > 0 && chart.center === null && (
          <Strip tone="quiet">Limits appear once there are values enough to find them from.</Strip>
        )}
      </Box>
      <Signals chart={chart} />
      <Values chart={chart} />
    </div>
  )
}

function Where({ row }: { row: { batchId: string | null; label: string } }) {
  return row.batchId === null ? row.label : <Link to={paths.batch(row.batchId)}>{row.label}</Link>
}

function Signals({ chart }: { chart: ControlChartView }) {
  const { at } = useLaboratoryTime()
  const lines = signalLines(chart)
  const shown = controlNumbers(chart)
  const columns: Column<SignalLine>[] = [
    {
      key: 'words',
      title: 'Signal',
      cell: (row) => (
        <StatusTag mark={{ word: 'signal', shape: 'diamond', tone: 'above' }}>{row.words}</StatusTag>
      ),
    },
    { key: 'where', title: 'Where', cell: (row) => <Where row={row} /> },
    { key: 'at', title: 'When', isNarrow: true, text: (row) => at(row.at) },
    {
      key: 'value',
      title: 'Value',
      unit: chart.unit,
      kind: 'number',
      text: (row) => shown(row.value),
    },
  ]
  if (chart.points.length === 0) return null
  return (
    <Box title={lines.length === 0 ? 'Signals: none' : `Signals: ${lines.length}`}>
      {lines.length === 0 ? (
        <p className="quiet">No point lies where the rules would call it out.</p>
      ) : (
        <DataTable
          label="Signals"
          rows={lines}
          columns={columns}
          rowKey={(row) => row.key}
          empty={{ title: 'No signal' }}
        />
      )}
    </Box>
  )
}

type Point = ControlChartView['points'][number]

/** The same values as a table: what a drawing cannot say exactly. */
function Values({ chart }: { chart: ControlChartView }) {
  const { at } = useLaboratoryTime()
  if (chart.points.length === 0) return null
  const shown = controlNumbers(chart)
  const columns: Column<Point>[] = [
    { key: 'where', title: 'Where', cell: (row) => <Where row={row} /> },
    { key: 'at', title: 'When', isNarrow: true, text: (row) => at(row.at) },
    {
      key: 'value',
      title: 'Value',
      unit: chart.unit,
      kind: 'number',
      text: (row) => shown(row.value),
    },
  ]
  return (
    <details className="box values-fold">
      <summary>All {chart.points.length} values, newest first</summary>
      <DataTable
        label="Values"
        rows={chart.points.toReversed()}
        columns={columns}
        rowKey={(row) => `${row.at}${row.label}`}
        empty={{ title: 'No value' }}
      />
    </details>
  )
}
