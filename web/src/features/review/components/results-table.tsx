import { Link } from 'react-router-dom'
import { paths } from '../../../lib'
import { Box, Clock, DataTable, NumberWithStory, StatusTag, type Column } from '../../../ui'
import { Tint } from '../../../ui/tint'
import {
  flagWords,
  shownNumbers,
  UNIT_WORDS,
  verdictOf,
  type BatchView,
  type PositionView,
} from '../../batches'

interface ResultsTableProps {
  batch: BatchView
  /** positions to be measured again instead of reported; left out where nothing can be chosen */
  rerun?: { chosen: ReadonlySet<string>; toggle: (positionId: string) => void }
}

/** The samples of a run as they would be reported. */
export function ResultsTable({ batch, rerun }: ResultsTableProps) {
  const rows = batch.rows.filter((row) => row.kind === 'sample').toSorted((a, b) => a.position - b.position)
  const columns: Column<PositionView>[] = [
    {
      key: 'sample',
      title: 'Sample',
      cell: (row) =>
        row.sampleId ? <Link to={paths.sample(row.sampleId)}>{row.sampleNumber}</Link> : row.label,
    },
    {
      key: 'point',
      title: 'Point',
      cell: (row) => (
        <>
          {row.pointName} <span className="quiet">· {row.clientName}</span>
        </>
      ),
    },
    {
      key: 'tint',
      title: 'Tint',
      cell: (row) => <Tint band={batch.band} absorbance={row.assessment.meanAbsorbance} />,
    },
    {
      key: 'text',
      title: 'As reported',
      kind: 'number',
      text: (row) => shownNumbers(row, row.assessment).concentration,
      wrap: (row, aligned) => (
        <NumberWithStory resultId={row.resultId} text={shownNumbers(row, row.assessment).concentration}>
          {aligned}
        </NumberWithStory>
      ),
    },
    {
      key: 'uncertainty',
      title: 'U, k = 2',
      kind: 'number',
      onPhone: 'beside',
      text: (row) => shownNumbers(row, row.assessment).uncertainty,
    },
    {
      key: 'unit',
      title: 'Unit',
      onPhone: 'beside',
      cell: (row) => UNIT_WORDS[row.assessment.unit ?? row.reporting.displayUnit],
    },
    {
      key: 'verdict',
      title: 'Verdict',
      cell: (row) => {
        const verdict = verdictOf(row, row.assessment)
        const flags = flagWords(row, row.assessment)
        return (
          <>
            {verdict && <StatusTag mark={verdict.mark}>{verdict.words}</StatusTag>}
            {row.assessment.limit && <span className="run-extra quiet">{row.assessment.limit.name}</span>}
            {flags.length > 0 && <span className="run-extra quiet">{flags.join(', ')}</span>}
          </>
        )
      },
    },
    {
      key: 'holding',
      title: 'Holding time',
      cell: (row) =>
        row.holding && row.holding.state === 'breached' ? (
          <Clock dueAt={row.holding.dueAt} />
        ) : (
          <span className="quiet">kept</span>
        ),
    },
    ...(rerun
      ? [
          {
            key: 'rerun',
            title: 'Measure again',
            cell: (row: PositionView) => (
              <label className="pick-cell">
                <input
                  type="checkbox"
                  checked={rerun.chosen.has(row.id)}
                  onChange={() => rerun.toggle(row.id)}
                />
                <span className="visually-hidden">
                  Measure {row.sampleNumber} again instead of reporting it
                </span>
              </label>
            ),
          },
        ]
      : []),
  ]
  return (
    <Box title={`Results: ${rows.length}`}>
      <DataTable
        label="Results as they would be reported"
        rows={rows}
        columns={columns}
        rowKey={(row) => row.id}
        rowTone={(row) => (rerun?.chosen.has(row.id) ? 'now' : undefined)}
        empty={{ title: 'This run holds no sample' }}
      />
    </Box>
  )
}
