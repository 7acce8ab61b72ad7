import {
  confirmSecondFactor,
  type BodyInput,
  type ResponseOf,
  type startSecondFactor,
} from '@weirlight/shared/contracts'
import { LIMITS } from '@weirlight/shared/limits'
import { Button, Form, Input } from 'antd'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { Box } from '../../../ui'
import { FormProblem } from '../../../ui/form-problem'
import { TOUCHES } from '../api/second-factor-queries'
import { DevicePicture } from './device-picture'

interface ConfirmDeviceProps {
  secret: ResponseOf<typeof startSecondFactor>
  onCancel: () => void
  onDone: (recoveryCodes: readonly string[]) => void
}

const inFours = (text: string) => text.replaceAll(/.{4}(?=.)/g, '$& ')

/** The secret, as picture and as text, and a code that shows that the device has it. */
export function ConfirmDevice({ secret, onCancel, onDone }: ConfirmDeviceProps) {
  const form = useEndpointForm<typeof confirmSecondFactor, BodyInput<typeof confirmSecondFactor>>({
    endpoint: confirmSecondFactor,
    toInput: ({ code }) => ({ body: { code: code ?? '' } }),
    invalidates: TOUCHES,
    onDone: ({ recoveryCodes }) => onDone(recoveryCodes),
  })
  return (
    <Box title="Give the secret to your device">
      <div className="stack">
        <p>
          Let the application on your phone read this picture, or type the secret below it. It is shown this
          once.
        </p>
        <DevicePicture uri={secret.uri} />
        <p>
          <span className="quiet">Secret</span>{' '}
          <strong className="device-secret">{inFours(secret.secret)}</strong>
        </p>
        <Form layout="vertical" requiredMark={false} {...form.formProps}>
          <FormProblem form={form} />
          <Form.Item name="code" label="The code that your device shows now" className="device-code">
            <Input
              autoComplete="one-time-code"
              inputMode="numeric"
              spellCheck={false}
              maxLength={LIMITS.codeLength}
              autoFocus
            />
          </Form.Item>
          <div className="row">
            <Button onClick={onCancel} disabled={form.isBusy}>
              Cancel
            </Button>
            <Button type="primary" htmlType="submit" loading={form.isBusy}>
              Turn it on
            </Button>
          </div>
        </Form>
      </div>
    </Box>
  )
}
