import { STATE_MARKS } from '@weirlight/shared/states'
import { useLaboratoryTime } from '../../../lib'
import { DataTable, StatusTag, type Column } from '../../../ui'
import type { CertificateView } from '../api/certificate-queries'

type Delivery = CertificateView['deliveries'][number]

/** Who was written to, when it left, and what the mail server said. */
export function DeliveriesTable({ deliveries }: { deliveries: CertificateView['deliveries'] }) {
  const { at } = useLaboratoryTime()
  const columns: Column<Delivery>[] = [
    {
      key: 'to',
      title: 'To',
      cell: (row) => (
        <span className="break">
          {row.to}
          {row.lastError !== '' && <span className="certificate-extra above">{row.lastError}</span>}
        </span>
      ),
    },
    { key: 'state', title: 'State', cell: (row) => <StatusTag mark={STATE_MARKS.mail[row.state]} /> },
    { key: 'sent', title: 'Sent', isNarrow: true, text: (row) => (row.sentAt ? at(row.sentAt) : '–') },
    {
      key: 'attempts',
      title: 'Attempts',
      isNarrow: true,
      isSecondary: true,
      text: (row) => String(row.attempts),
    },
  ]
  return (
    <DataTable
      label="Messages with this certificate"
      rows={deliveries}
      columns={columns}
      rowKey={(row) => row.mailId}
      empty={{ title: 'Nobody was written to yet' }}
    />
  )
}
