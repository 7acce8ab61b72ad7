import { useInfiniteQuery } from '@tanstack/react-query'
import { listMail, retryMail, type ResponseOf } from '@weirlight/shared/contracts'
import type { Action } from '@weirlight/shared/permissions'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Button } from 'antd'
import { Link } from 'react-router-dom'
import { pagesFor, paths, useCall, useCan, useFilters, useLaboratoryTime, useNotice } from '../../../lib'
import {
  Clock,
  DataTable,
  FilterBar,
  FilterSelect,
  MailAddress,
  StatusTag,
  Strip,
  type Column,
} from '../../../ui'

type Message = ResponseOf<typeof listMail>['items'][number]

const STATES = (['waiting', 'sending', 'sent', 'failed'] as const).map((value) => ({
  value,
  label: STATE_MARKS.mail[value].word,
}))
const ABOUT: Record<string, { word: string; to: (id: string) => string; needs: Action }> = {
  alert: { word: 'alert', to: paths.alert, needs: 'alerts.read' },
  certificate: { word: 'certificate', to: paths.certificate, needs: 'certificates.read' },
  user: { word: 'account', to: paths.settingsPerson, needs: 'users.read' },
  client: { word: 'client', to: paths.client, needs: 'clients.read' },
}

/** Messages that left or should leave, newest first. */
export function MailList() {
  const may = useCan()
  const notice = useNotice()
  const { at } = useLaboratoryTime()
  const [filters, change, clear] = useFilters({ state: '' })
  const query = useInfiniteQuery(pagesFor(listMail, { query: { state: filters.state as Message['state'] } }))
  const retry = useCall(retryMail, {
    invalidates: [listMail],
    onDone: (message) => notice.done(`The message to ${message.to} is tried again now.`),
  })
  const columns: Column<Message>[] = [
    { key: 'when', title: 'Written', isNarrow: true, text: (row) => at(row.createdAt) },
    {
      key: 'state',
      title: 'State',
      onPhone: 'corner',
      cell: (row) => <StatusTag mark={STATE_MARKS.mail[row.state]} />,
    },
    { key: 'to', title: 'To', cell: (row) => <MailAddress of={row.to} /> },
    {
      key: 'subject',
      title: 'Subject',
      cell: (row) => (
        <div className="wide-cell">
          {row.subject} <About message={row} />
          {row.lastError !== '' && row.state !== 'sent' && <div className="note above">{row.lastError}</div>}
        </div>
      ),
    },
    {
      key: 'tries',
      title: 'Tries',
      kind: 'number',
      text: (row) => (row.attempts === 0 ? null : String(row.attempts)),
    },
    {
      key: 'sent',
      title: 'Left',
      cell: (row) =>
        row.sentAt ? (
          <span className="nowrap">{at(row.sentAt)}</span>
        ) : row.nextTryAt && row.state === 'waiting' ? (
          <Clock dueAt={row.nextTryAt} what="next try" soonHours={0} />
        ) : (
          <span className="quiet">not yet</span>
        ),
    },
    {
      key: 'acts',
      title: <span className="visually-hidden">What can be done</span>,
      isNarrow: true,
      cell: (row) =>
        may('mail.retry') &&
        row.state === 'failed' && (
          <Button
            size="small"
            loading={retry.isPending && retry.variables.params.id === row.id}
            onClick={() => retry.mutate({ params: { id: row.id } })}
          >
            Try again<span className="visually-hidden">: {row.subject}</span>
          </Button>
        ),
    },
  ]
  return (
    <>
      <FilterBar onClear={clear}>
        <FilterSelect
          label="State"
          value={filters.state}
          onChange={(state) => change({ state })}
          options={STATES}
        />
      </FilterBar>
      {retry.error && (
        <Strip tone="above" isAlert>
          {retry.error.message}
        </Strip>
      )}
      <DataTable
        label="Messages"
        query={query}
        columns={columns}
        rowKey={(row) => row.id}
        empty={{
          title: filters.state === 'failed' ? 'Every message was delivered' : 'No message fits',
          text: 'Invitations, alerts and certificates appear here when they are written.',
        }}
      />
    </>
  )
}

function About({ message }: { message: Message }) {
  const may = useCan()
  const about = ABOUT[message.aboutKind]
  if (!about || message.aboutId === '' || !may(about.needs)) return null
  return (
    <Link className="note" to={about.to(message.aboutId)}>
      the {about.word}
    </Link>
  )
}
