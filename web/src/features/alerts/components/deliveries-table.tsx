import { STATE_MARKS } from '@weirlight/shared/states'
import { useLaboratoryTime } from '../../../lib'
import { DataTable, StatusTag, type Column } from '../../../ui'
import type { Delivery } from '../api/alert-queries'

/** Who was told when, and what the mail server said. */
export function DeliveriesTable({ deliveries, label }: { deliveries: readonly Delivery[]; label: string }) {
  const { at } = useLaboratoryTime()
  const columns: Column<Delivery>[] = [
    { key: 'to', title: 'To', cell: (row) => <span className="break">{row.to}</span> },
    { key: 'state', title: 'State', cell: (row) => <StatusTag mark={STATE_MARKS.mail[row.state]} /> },
    { key: 'sent', title: 'Sent', text: (row) => (row.sentAt ? at(row.sentAt) : '–') },
    { key: 'attempts', title: 'Attempts', isSecondary: true, text: (row) => String(row.attempts) },
    ...(deliveries.some((row) => row.lastError !== '')
      ? [
          {
            key: 'error',
            title: 'What the mail server said',
            text: (row: Delivery) => row.lastError || null,
          },
        ]
      : []),
  ]
  return (
    <DataTable
      label={label}
      rows={deliveries}
      columns={columns}
      rowKey={(row) => row.mailId}
      empty={{
        title: 'Nobody was written to',
        text: 'No contact of this client is set to get these messages.',
      }}
    />
  )
}
