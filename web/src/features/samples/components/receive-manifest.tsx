import { useQueryClient } from '@tanstack/react-query'
import {
  applyManifest,
  listSamples,
  listWaiting,
  previewManifest,
  type ResponseOf,
} from '@weirlight/shared/contracts'
import { useEffect, useState } from 'react'
import { Link } from 'react-router-dom'
import { call, invalidate, paths, useNotice } from '../../../lib'
import { Box, DataTable } from '../../../ui'
import { UploadPreview } from '../../../ui/upload-preview'
import { MANIFEST_COLUMNS, templateText } from '../receive/manifest-columns'

type Found = ResponseOf<typeof previewManifest>
type Received = ResponseOf<typeof applyManifest>['samples']

interface Shown {
  columns: string[]
  rows: { line: number; cells: string[]; problems: Found['rows'][number]['problems'] }[]
  found: Found
}

/** The columns of the file as it was read, and those that only a complaint names. */
function shownOf(found: Found): Shown {
  const columns = [
    ...new Set(
      found.rows.flatMap((row) => [...Object.keys(row.values), ...row.problems.map((each) => each.column)]),
    ),
  ]
  const order = new Map(MANIFEST_COLUMNS.map(({ title }, index) => [title, index]))
  const place = (column: string) => order.get(column) ?? MANIFEST_COLUMNS.length
  const sorted = columns.toSorted((a, b) => place(a) - place(b))
  return {
    columns: sorted,
    rows: found.rows.map((row) => ({
      line: row.row,
      cells: sorted.map((column) => row.values[column] ?? ''),
      problems: row.problems,
    })),
    found,
  }
}

/** A sheet of samples: read first, every bad row named, then received whole. */
export function ReceiveManifest() {
  const client = useQueryClient()
  const notice = useNotice()
  const template = useTemplate()
  const [received, setReceived] = useState<Received | null>(null)
  if (received) return <ManifestReceived received={received} onMore={() => setReceived(null)} />
  return (
    <div className="stack">
      <UploadPreview<Shown>
        accept=".xlsx,.csv"
        what="samples"
        preview={async (file, onProgress) => shownOf(await call(previewManifest, { file }, { onProgress }))}
        apply={async ({ found }) => {
          const answer = await call(applyManifest, { params: { id: found.uploadId } })
          void invalidate(client, [listSamples, listWaiting])
          notice.done(`${answer.samples.length} samples of “${found.fileName}” are received.`)
          setReceived(answer.samples)
        }}
        applyLabel={({ found }) =>
          found.good === 1 ? 'Receive the sample' : `Receive ${found.good} samples`
        }
        {...(template ? { template: { href: template, label: 'An empty manifest to fill in' } } : {})}
      />
      <Box title="Columns of a manifest">
        <DataTable
          label="Columns of a manifest"
          rows={MANIFEST_COLUMNS}
          columns={[
            { key: 'title', title: 'Column', text: (row) => row.title },
            {
              key: 'needed',
              title: 'Needed',
              cell: (row) => (row.isRequired ? 'yes' : <span className="quiet">may be missing</span>),
            },
            { key: 'what', title: 'What goes in', text: (row) => row.what },
          ]}
          rowKey={(row) => row.title}
          empty={{ title: '' }}
        />
      </Box>
    </div>
  )
}

/** The heading line as a file, for as long as the page is open. */
function useTemplate(): string | null {
  const [href, setHref] = useState<string | null>(null)
  useEffect(() => {
    const made = URL.createObjectURL(new Blob([templateText()], { type: 'text/csv' }))
    setHref(made)
    return () => URL.revokeObjectURL(made)
  }, [])
  return href
}

function ManifestReceived({ received, onMore }: { received: Received; onMore: () => void }) {
  return (
    <div className="stack">
      <Box title={`${received.length} ${received.length === 1 ? 'sample' : 'samples'} received`}>
        <DataTable
          label="Samples received"
          rows={received}
          columns={[{ key: 'number', title: 'Number', text: (row) => row.number }]}
          rowKey={(row) => row.id}
          rowTo={(row) => paths.sample(row.id)}
          empty={{ title: 'None' }}
        />
      </Box>
      <div className="row">
        <Link
          className="button main"
          to={`${paths.labels}?samples=${received.map((each) => each.id).join(',')}`}
        >
          Print the labels
        </Link>
        <Link className="button" to={`${paths.receiving}?state=received`}>
          Decide on acceptance
        </Link>
        <button type="button" className="button" onClick={onMore}>
          Receive another manifest
        </button>
      </div>
    </div>
  )
}
