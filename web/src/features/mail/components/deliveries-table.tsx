import type { delivery } from '@weirlight/shared/contracts'
import { STATE_MARKS } from '@weirlight/shared/states'
import type { z } from 'zod'
import { useLaboratoryTime } from '../../../lib'
import { DataTable, MailAddress, StatusTag, type Column } from '../../../ui'
import './deliveries.css'

/** as alerts and certificates give it */
type Delivery = z.infer<typeof delivery>

interface DeliveriesTableProps {
  deliveries: readonly Delivery[]
  label: string
}

/** Who was written to, when it left, and what the mail server said. */
export function DeliveriesTable({ deliveries, label }: DeliveriesTableProps) {
  const { at } = useLaboratoryTime()
  const columns: Column<Delivery>[] = [
    {
      key: 'to',
      title: 'To',
      cell: (row) => (
        <span className="delivery-to">
          <MailAddress of={row.to} />
          {row.lastError !== '' && <span className="delivery-error above">{row.lastError}</span>}
        </span>
      ),
    },
    {
      key: 'state',
      title: 'State',
      onPhone: 'corner',
      cell: (row) => <StatusTag mark={STATE_MARKS.mail[row.state]} />,
    },
    { key: 'sent', title: 'Sent', text: (row) => (row.sentAt ? at(row.sentAt) : '–') },
    {
      key: 'attempts',
      title: 'Attempts',
      isNarrow: true,
      isSecondary: true,
      text: (row) => (row.attempts === 0 ? null : String(row.attempts)),
    },
  ]
  return (
    <DataTable
      label={label}
      rows={deliveries}
      columns={columns}
      rowKey={(row) => row.mailId}
      empty={{
        title: 'Nobody was written to yet',
        text: 'Messages go to the contacts of the client that are set to get them.',
      }}
    />
  )
}
