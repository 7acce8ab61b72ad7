import { useQuery, useQueryClient } from '@tanstack/react-query'
import {
  applyReadings,
  listBatches,
  previewReadings,
  runSheetFile,
  type BatchView,
  type ResponseOf,
} from '@weirlight/shared/contracts'
import { LIMITS } from '@weirlight/shared/limits'
import { useState } from 'react'
import { useNavigate } from 'react-router-dom'
import { call, hrefFor, invalidate, paths, ProblemError, useNotice } from '../../../lib'
import { Loaded, MarginPage } from '../../../ui'
import { UploadPreview } from '../../../ui/upload-preview'
import { batchQuery } from '../api/batch-queries'
import { columnTitle, replicateColumns } from '../run-sheet/cells'

type Preview = ResponseOf<typeof previewReadings>
interface ShownPreview {
  columns: string[]
  rows: { line: number; cells: string[]; problems: { column: string; message: string }[] }[]
  summary: string
  found: Preview
}

/** Saved readings that the file would change. */
export const changesIn = (found: Preview): number =>
  found.rows.reduce(
    (sum, row) =>
      sum +
      row.readings.filter((text, index) => {
        const before = row.current[index] ?? ''
        return before !== '' && text !== '' && text !== before
      }).length,
    0,
  )

const LIST = { to: paths.batches, label: 'Batches' }

/** A file of absorbances into the cells of a run sheet, looked at first. */
export function LoadReadings({ id }: { id: string }) {
  return (
    <Loaded query={useQuery(batchQuery(id))} skeleton="page" what="batch" back={LIST}>
      {(batch) => <LoadPage batch={batch} />}
    </Loaded>
  )
}

function LoadPage({ batch }: { batch: BatchView }) {
  const client = useQueryClient()
  const navigate = useNavigate()
  const notice = useNotice()
  const [reason, setReason] = useState('')
  const columns = replicateColumns(batch.replicates).map(columnTitle)

  const preview = async (file: File, onProgress: (share: number) => void): Promise<ShownPreview> => {
    const found = await call(previewReadings, { params: { id: batch.id }, file }, { onProgress })
    const changed = changesIn(found)
    return {
      columns: ['Position', 'Sample', ...columns],
      rows: found.rows.map((row) => ({
        line: row.row,
        cells: [row.position, row.label, ...columns.map((_, index) => cellText(row, index))],
        problems: row.problems,
      })),
      summary: changed === 0 ? 'no saved reading changes' : `${changed} saved readings change`,
      found,
    }
  }
  const apply = async ({ found }: ShownPreview) => {
    const needsReason = changesIn(found) > 0
    if (needsReason && reason.trim().length < LIMITS.reasonMinimum) throw reasonMissing()
    const answer = await call(applyReadings, {
      params: { id: batch.id, uploadId: found.uploadId },
      body: needsReason ? { reason } : {},
    })
    client.setQueryData(batchQuery(batch.id).queryKey, answer)
    void invalidate(client, [listBatches])
    notice.done(`${found.good} rows of “${found.fileName}” were entered.`)
    await navigate(paths.batch(batch.id))
  }

  return (
    <MarginPage
      title={`Load readings into ${batch.number}`}
      subtitle={batch.methodTitle}
      back={{ to: paths.batch(batch.id), label: `Batch ${batch.number}` }}
      notes={[
        'One row a position: its number, then the absorbances. The workbook of this run sheet has the rows ready.',
        'Nothing is entered before you have seen every row. All rows are entered, or none.',
      ]}
    >
      <UploadPreview<ShownPreview>
        accept=".xlsx,.csv"
        what="readings"
        preview={preview}
        apply={apply}
        applyLabel={({ found }) => `Enter ${found.good} rows`}
        template={{
          href: hrefFor(runSheetFile, { params: { id: batch.id } }),
          label: 'The run sheet as a workbook to fill in',
        }}
      >
        {({ found }) =>
          changesIn(found) > 0 && (
            <label className="labelled">
              <span className="labelled-name">Why do saved readings change? Both are kept.</span>
              <input
                className="field"
                value={reason}
                maxLength={LIMITS.reasonLength}
                placeholder="In a few words"
                onChange={(event) => setReason(event.target.value)}
              />
            </label>
          )
        }
      </UploadPreview>
    </MarginPage>
  )
}

/** `0.0307 → 0.0317` where a saved reading changes */
function cellText(row: Preview['rows'][number], index: number): string {
  const text = row.readings[index] ?? ''
  const before = row.current[index] ?? ''
  return before !== '' && text !== '' && before !== text ? `${before} → ${text}` : text
}

function reasonMissing(): ProblemError {
  return new ProblemError({
    code: 'invalid-input',
    status: 0,
    title: 'A reason is missing',
    detail: 'Say why saved readings change: in a few words, in the field above the button.',
  })
}
