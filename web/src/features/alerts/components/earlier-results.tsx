import { showUnit } from '@weirlight/shared/contracts'
import { useMemo } from 'react'
import { useLaboratoryTime } from '../../../lib'
import { Box, DataTable, StatusTag, type Column } from '../../../ui'
import { STATE_MARKS } from '@weirlight/shared/states'
import { shownNumber, TrendFigure } from '../../results'
import type { AlertView } from '../api/alert-queries'
import { earlierWords, trendOfAlert } from '../alert-words'

type Earlier = AlertView['earlier'][number]
const isVerdict = (verdict: string): verdict is keyof typeof STATE_MARKS.verdict =>
  verdict in STATE_MARKS.verdict

/** What the same point showed before, drawn with this result and listed. */
export function EarlierResults({ alert, height = 220 }: { alert: AlertView; height?: number }) {
  const { at } = useLaboratoryTime()
  const trend = useMemo(() => trendOfAlert(alert), [alert])
  const before = trend.points.slice(0, -1)
  const columns: Column<Earlier>[] = [
    { key: 'at', title: 'Collected', text: (row) => at(row.at) },
    {
      key: 'text',
      title: 'Result',
      unit: showUnit(alert.unit),
      kind: 'number',
      text: (row) => shownNumber(row.text),
    },
    {
      key: 'verdict',
      title: 'Finding then',
      cell: (row) =>
        row.verdict !== null && isVerdict(row.verdict) ? (
          <StatusTag mark={STATE_MARKS.verdict[row.verdict]} />
        ) : (
          <span className="quiet">no limit</span>
        ),
    },
  ]
  return (
    <Box title="Earlier results at this point">
      {alert.earlier.length === 0 ? (
        <p className="quiet">This is the first released result of its kind here.</p>
      ) : (
        <>
          <p className="note">{earlierWords(before, alert.unit)}</p>
          <TrendFigure trend={trend} height={height} />
          <DataTable
            label="Earlier results"
            rows={alert.earlier}
            columns={columns}
            rowKey={(row) => row.at}
            empty={{ title: 'None' }}
          />
        </>
      )}
    </Box>
  )
}
