import { useInfiniteQuery } from '@tanstack/react-query'
import { verifySeals, type listSeals, type ResponseOf } from '@weirlight/shared/contracts'
import { Button } from 'antd'
import { useCall, useLaboratoryTime } from '../../../lib'
import { Box, DataTable, StatusTag, Strip, type Column } from '../../../ui'
import { sealPages } from '../api/history-queries'
import './history.css'

type Seal = ResponseOf<typeof listSeals>['items'][number]
type Checked = ResponseOf<typeof verifySeals>

/** The seals over the history, and the button that computes them again. */
export function Seals() {
  const { at } = useLaboratoryTime()
  const query = useInfiniteQuery(sealPages())
  const columns: Column<Seal>[] = [
    { key: 'id', title: 'Seal', text: (row) => row.id },
    { key: 'at', title: 'Set', text: (row) => at(row.sealedAt) },
    {
      key: 'entries',
      title: 'Entries',
      kind: 'number',
      text: (row) => String(row.entries),
    },
    { key: 'span', title: 'From and to', text: (row) => `${row.firstEntry} to ${row.lastEntry}` },
    { key: 'head', title: 'Head', cell: (row) => <code className="seal-hash">{row.head}</code> },
    {
      key: 'root',
      title: 'Root of its tree',
      isSecondary: true,
      cell: (row) => <code className="seal-hash">{row.root}</code>,
    },
  ]
  return (
    <div className="stack">
      <SealCheck />
      <DataTable
        label="Seals, newest first"
        query={query}
        columns={columns}
        rowKey={(row) => row.id}
        empty={{ title: 'No seal is set yet', text: 'A seal is set over new entries at regular times.' }}
      />
      <HowToCheck newest={query.data?.pages[0]?.items[0]} />
    </div>
  )
}

function SealCheck() {
  const check = useCall(verifySeals)
  return (
    <Box title="Check the seals">
      <div className="row">
        <Button type="primary" loading={check.isPending} onClick={() => check.mutate({})}>
          {check.isPending ? 'Computing…' : 'Check the seals'}
        </Button>
        <span className="note">
          Computes the latest seals again from the entries as they stand now, and compares.
        </span>
      </div>
      {check.error && (
        <div className="box-foot">
          <Strip tone="above" isAlert>
            {check.error.message}
          </Strip>
        </div>
      )}
      {check.data && <Outcome checked={check.data} />}
    </Box>
  )
}

const WHOLE = { word: 'The seals hold', shape: 'disc', tone: 'meets' } as const
const BROKEN = { word: 'A seal is broken', shape: 'triangle', tone: 'above' } as const

function Outcome({ checked }: { checked: Checked }) {
  if (checked.checked === 0) return <p className="box-foot quiet">There is no seal to check yet.</p>
  return (
    <div className="box-foot" role="status">
      <StatusTag mark={checked.ok ? WHOLE : BROKEN} />
      <p>
        {checked.ok
          ? `${checked.checked === 1 ? 'One seal' : `${checked.checked} seals`} over ${checked.entries} entries: computed again, and the same.`
          : `Seal ${checked.brokenAt ?? '?'} no longer fits its entries. Stop, keep everything as it is, and compare with a backup and with a head kept elsewhere.`}
      </p>
      {checked.head && (
        <p className="note">
          Newest head: <code className="seal-hash">{checked.head}</code>
        </p>
      )}
    </div>
  )
}

/** Enough for somebody who does not trust this program. */
function HowToCheck({ newest }: { newest: Seal | undefined }) {
  const span = newest ?? { firstEntry: 'FIRST', lastEntry: 'LAST' }
  return (
    <Box title="How to check them outside of this program">
      <ol className="how-to">
        <li>
          Keep a head somewhere else: printed, mailed to yourself, in another house’s safe. A head that stands
          elsewhere cannot be changed here, and it stands for everything before it.
        </li>
        <li>
          Take the entries of a seal from the database, or from a backup of it, one line of text each:{' '}
          <code>
            select history_leaf(h) from history h where id between {span.firstEntry} and {span.lastEntry}{' '}
            order by id
          </code>
        </li>
        <li>
          Hash them into a tree as RFC 9162, section 2.1.1 says: SHA-256 over the byte 00 and the line; then
          over the byte 01, the left and the right hash. What is left is the root; it must be the root of the
          seal.
        </li>
        <li>
          Chain it: SHA-256 over the byte 02, the head of the seal before (32 zero bytes for the first), then
          the seal’s number, its first entry, its last entry and the number of entries, each in eight bytes,
          the highest first, then the root. What comes out must be the head of the seal.
        </li>
        <li>Go on to the newest seal. When its head is the one you kept, nothing before it was touched.</li>
      </ol>
    </Box>
  )
}
