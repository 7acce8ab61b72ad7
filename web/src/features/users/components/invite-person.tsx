import { inviteUser, type BodyInput } from '@weirlight/shared/contracts'
import { Form, Input } from 'antd'
import { useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { DialogFoot } from '../../../ui/form-dialog'
import { FormProblem } from '../../../ui/form-problem'
import { TOUCHES } from '../api/user-queries'
import { AccountFields, accountOf } from './account-fields'

type Values = BodyInput<typeof inviteUser> & { clientId: string | null }

export function InvitePerson({ onDone }: { onDone: () => void }) {
  const notice = useNotice()
  const form = useEndpointForm<typeof inviteUser, Values>({
    endpoint: inviteUser,
    toInput: (values) => ({ body: { ...accountOf(values), email: values.email ?? '' } }),
    invalidates: TOUCHES,
    onDone: (person) => {
      notice.done(`The invitation for ${person.email} is on its way.`)
      onDone()
    },
  })
  return (
    <Form layout="vertical" {...form.formProps}>
      <FormProblem form={form} />
      <p className="note dialog-words">
        A link is mailed. With it the person chooses a passphrase; nobody else ever knows it.
      </p>
      <Form.Item name="email" label="E-mail" required>
        <Input autoComplete="off" inputMode="email" />
      </Form.Item>
      <AccountFields />
      <DialogFoot onCancel={onDone} isBusy={form.isBusy} actionLabel="Send the invitation" />
    </Form>
  )
}
