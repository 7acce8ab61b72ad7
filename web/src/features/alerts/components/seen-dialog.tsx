import { Button, Form, Input } from 'antd'
import { LIMITS } from '@weirlight/shared/limits'
import { acknowledgeAlert, getAlert, getToday, listAlerts, portalNow } from '@weirlight/shared/contracts'
import { useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { FormDialog } from '../../../ui/form-dialog'
import { FormProblem } from '../../../ui/form-problem'
import type { AlertView } from '../api/alert-queries'
import { overWhat, whatWasFound } from '../alert-words'

interface SeenDialogProps {
  alert: AlertView
  isOpen: boolean
  onClose: () => void
}

/** The client says that it has seen the alert; a note may go with it. */
export function SeenDialog({ alert, isOpen, onClose }: SeenDialogProps) {
  return (
    <FormDialog isOpen={isOpen} onClose={onClose} title="I have seen this">
      <SeenForm alert={alert} onClose={onClose} />
    </FormDialog>
  )
}

interface Values {
  note: string
}

function SeenForm({ alert, onClose }: { alert: AlertView; onClose: () => void }) {
  const notice = useNotice()
  const form = useEndpointForm<typeof acknowledgeAlert, Values>({
    endpoint: acknowledgeAlert,
    toInput: ({ note }) => ({ params: { id: alert.id }, body: { version: alert.version, note } }),
    invalidates: [getAlert, listAlerts, getToday, portalNow],
    onDone: () => {
      notice.done(`The laboratory knows that you have seen ${alert.number}.`)
      onClose()
    },
  })
  return (
    <Form layout="vertical" initialValues={{ note: '' }} {...form.formProps}>
      <div className="stack dialog-words">
        <p>
          {whatWasFound(alert)}, {overWhat(alert)}, {alert.pointName}.
        </p>
        <p>
          Your name and the time are kept, and the laboratory sees your answer. It says that you have seen the
          alert; it takes no duty from you and adds none.
        </p>
      </div>
      <FormProblem form={form} />
      <Form.Item name="note" label="A note to the laboratory (may stay empty)">
        <Input.TextArea rows={3} maxLength={LIMITS.noteLength} />
      </Form.Item>
      <div className="row dialog-foot">
        <Button onClick={onClose} disabled={form.isBusy}>
          Not yet
        </Button>
        <Button type="primary" htmlType="submit" loading={form.isBusy}>
          I have seen this
        </Button>
      </div>
    </Form>
  )
}
