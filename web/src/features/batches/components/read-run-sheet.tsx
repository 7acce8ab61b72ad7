import type { BatchView } from '@weirlight/shared/contracts'
import { RunGrid } from '../../../ui/run-grid'
import { readingIn, rowOf, positionName } from '../run-sheet/cells'
import { useRunColumns, type SheetRow } from './run-grid-columns'
import './batches.css'

/** The run sheet as the server keeps it, to read. */
export function ReadRunSheet({ batch }: { batch: BatchView }) {
  const rows = batch.rows
    .map((row): SheetRow => ({ ...row, live: row.assessment }))
    .toSorted((a, b) => a.position - b.position)
  const columns = useRunColumns({ batch, rows })
  return (
    <RunGrid<SheetRow>
      label={`Run sheet of ${batch.number}`}
      rows={rows}
      rowKey={(row) => row.id}
      rowName={positionName}
      columns={columns}
      valueOf={(rowKey, columnKey) => readingIn(rowOf(batch, rowKey), columnKey)?.absorbance ?? ''}
      onChange={() => undefined}
      rowTone={(row) => (row.kind === 'sample' ? undefined : 'qc')}
      isReadOnly
    />
  )
}
