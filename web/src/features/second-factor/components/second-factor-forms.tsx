import {
  removeSecondFactor,
  startSecondFactor,
  type BodyInput,
  type ResponseOf,
} from '@weirlight/shared/contracts'
import { LIMITS } from '@weirlight/shared/limits'
import { Form, Input } from 'antd'
import { useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { DialogFoot } from '../../../ui/form-dialog'
import { FormProblem } from '../../../ui/form-problem'
import { TOUCHES } from '../api/second-factor-queries'

interface GivePassphraseProps {
  onCancel: () => void
  onDone: (made: ResponseOf<typeof startSecondFactor>) => void
}

export function GivePassphrase({ onCancel, onDone }: GivePassphraseProps) {
  const form = useEndpointForm<typeof startSecondFactor, BodyInput<typeof startSecondFactor>>({
    endpoint: startSecondFactor,
    toInput: ({ passphrase }) => ({ body: { passphrase: passphrase ?? '' } }),
    onDone,
  })
  return (
    <Form layout="vertical" requiredMark={false} {...form.formProps}>
      <FormProblem form={form} />
      <Form.Item name="passphrase" label="Your passphrase">
        <Input.Password autoComplete="current-password" autoFocus />
      </Form.Item>
      <DialogFoot onCancel={onCancel} isBusy={form.isBusy} actionLabel="Go on" />
    </Form>
  )
}

export function RemoveSecondFactor({ onDone }: { onDone: () => void }) {
  const notice = useNotice()
  const form = useEndpointForm<typeof removeSecondFactor, BodyInput<typeof removeSecondFactor>>({
    endpoint: removeSecondFactor,
    toInput: ({ passphrase, code }) => ({ body: { passphrase: passphrase ?? '', code: code ?? '' } }),
    invalidates: TOUCHES,
    onDone: () => {
      notice.done('Your second factor is taken off.')
      onDone()
    },
  })
  return (
    <Form layout="vertical" requiredMark={false} {...form.formProps}>
      <FormProblem form={form} />
      <p className="dialog-words">
        Your passphrase alone signs you in from then on. The entry in your device and the recovery codes are
        worth nothing any more.
      </p>
      <Form.Item name="passphrase" label="Your passphrase">
        <Input.Password autoComplete="current-password" autoFocus />
      </Form.Item>
      <Form.Item name="code" label="Code from your device, or a recovery code">
        <Input autoComplete="one-time-code" spellCheck={false} maxLength={LIMITS.codeLength} />
      </Form.Item>
      <DialogFoot onCancel={onDone} isBusy={form.isBusy} actionLabel="Take it off" />
    </Form>
  )
}
