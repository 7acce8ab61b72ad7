import { alertStates } from '@weirlight/shared/states'
import { Button } from 'antd'
import { useState } from 'react'
import { useCan, useNotice } from '../../../lib'
import { ReasonDialog } from '../../../ui/dialogs'
import { useCancelAlert, useCloseAlert, type AlertView } from '../api/alert-queries'
import { isAnswered } from '../alert-words'

/** What the laboratory may do with an alert: the answer itself is the client's alone. */
export function AlertActions({ alert }: { alert: AlertView }) {
  const may = useCan()
  const notice = useNotice()
  const [asked, setAsked] = useState<'close' | 'cancel' | null>(null)
  const close = useCloseAlert()
  const cancel = useCancelAlert()
  if (!may('alerts.manage')) return null
  const input = (reason: string) => ({
    params: { id: alert.id },
    body: { version: alert.version, reason },
  })
  return (
    <>
      {alertStates.may(alert.state, 'cancel') && (
        <Button danger onClick={() => setAsked('cancel')}>
          Cancel the alert
        </Button>
      )}
      {alertStates.may(alert.state, 'close') && (
        <Button type="primary" onClick={() => setAsked('close')}>
          Close
        </Button>
      )}
      {!isAnswered(alert) && (
        <span className="note act-note">It can be closed once the client has answered.</span>
      )}
      <ReasonDialog
        isOpen={asked === 'close'}
        onClose={() => setAsked(null)}
        title={`Close ${alert.number}`}
        consequences={[
          'Nothing more is to be done by the laboratory. The alert stays in the record with your words.',
        ]}
        label="What was done"
        actionLabel="Close the alert"
        onConfirm={async (reason) => {
          await close.mutateAsync(input(reason))
          notice.done(`${alert.number} is closed.`)
        }}
      />
      <ReasonDialog
        isOpen={asked === 'cancel'}
        onClose={() => setAsked(null)}
        title={`Cancel ${alert.number}`}
        consequences={[
          `It was raised in error. ${whoIsTold(alert)}`,
          'The alert and its cancellation stay in the record.',
        ]}
        actionLabel="Cancel the alert"
        isDangerous
        onConfirm={async (reason) => {
          await cancel.mutateAsync(input(reason))
          notice.done(`${alert.number} is cancelled; everybody told is told again.`)
        }}
      />
    </>
  )
}

function whoIsTold({ deliveries }: AlertView): string {
  const people = new Set(deliveries.map((mail) => mail.to)).size
  if (people === 0) return 'Nobody was written to.'
  return people === 1
    ? 'The one person written to is told by mail that it is cancelled, with your reason.'
    : `All ${people} people written to are told by mail that it is cancelled, with your reason.`
}
