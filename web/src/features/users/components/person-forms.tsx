import { useQuery } from '@tanstack/react-query'
import { authoriseUser, changeUser, type BodyInput } from '@weirlight/shared/contracts'
import { Form, Input } from 'antd'
import { useLaboratoryTime, useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { SelectInput } from '../../../ui'
import { DialogFoot } from '../../../ui/form-dialog'
import { FormProblem } from '../../../ui/form-problem'
import { DayInput } from '../../../ui/time-inputs'
import { methodChoicesQuery, TOUCHES, type UserView } from '../api/user-queries'
import { ACTIVITIES, ACTIVITY_WORDS } from '../user-words'
import { AccountFields, accountOf, type AccountValues } from './account-fields'

interface PersonFormProps {
  person: UserView
  onDone: () => void
}

export function ChangePerson({ person, onDone }: PersonFormProps) {
  const notice = useNotice()
  const form = useEndpointForm<typeof changeUser, AccountValues & { reason: string }>({
    endpoint: changeUser,
    toInput: (values) => ({
      params: { id: person.id },
      body: {
        ...accountOf(values),
        version: person.version,
        ...(values.reason ? { reason: values.reason } : {}),
      },
    }),
    invalidates: TOUCHES,
    basedOn: person.version,
    onDone: () => {
      notice.done(`${person.name} is changed.`)
      onDone()
    },
  })
  return (
    <Form layout="vertical" initialValues={person} {...form.formProps}>
      <FormProblem form={form} />
      <p className="note dialog-words">
        Another role or utility ends this person’s sessions: they sign in again with the new rights.
      </p>
      <AccountFields />
      <Form.Item name="reason" label="Why, in a few words (may stay empty)">
        <Input autoComplete="off" />
      </Form.Item>
      <DialogFoot onCancel={onDone} isBusy={form.isBusy} actionLabel="Change it" />
    </Form>
  )
}

/** The same day a year on. */
function yearAfter(day: string): string {
  return `${Number(day.slice(0, 4)) + 1}${day.slice(4)}`.replace('-02-29', '-02-28')
}

type Authorising = BodyInput<typeof authoriseUser>

export function AuthorisePerson({ person, onDone }: PersonFormProps) {
  const notice = useNotice()
  const { today } = useLaboratoryTime()
  const methods = useQuery(methodChoicesQuery)
  const form = useEndpointForm<typeof authoriseUser, Authorising>({
    endpoint: authoriseUser,
    toInput: (values) => ({
      params: { id: person.id },
      body: { ...values, evidence: values.evidence ?? '' },
    }),
    invalidates: TOUCHES,
    onDone: () => {
      notice.done(`${person.name} is authorised.`)
      onDone()
    },
  })
  return (
    <Form
      layout="vertical"
      initialValues={{ validFrom: today(), validUntil: yearAfter(today()) }}
      {...form.formProps}
    >
      <FormProblem form={form} />
      <div className="form-grid">
        <Form.Item name="activity" label="May" required>
          <SelectInput options={ACTIVITIES.map((value) => ({ value, label: ACTIVITY_WORDS[value] }))} />
        </Form.Item>
        <Form.Item name="methodId" label="By" required>
          <SelectInput
            options={(methods.data?.items ?? [])
              .filter((each) => each.active)
              .map((each) => ({ value: each.id, label: each.title }))}
          />
        </Form.Item>
        <Form.Item name="validFrom" label="From" required>
          <DayInput />
        </Form.Item>
        <Form.Item name="validUntil" label="Until" required>
          <DayInput />
        </Form.Item>
        <Form.Item
          name="evidence"
          label="What shows it"
          required
          className="wide"
          extra="For example: four control samples on 2026-11-20, mean recovery 99.1 %, file P-14."
        >
          <Input.TextArea autoSize={{ minRows: 2, maxRows: 5 }} />
        </Form.Item>
      </div>
      <DialogFoot onCancel={onDone} isBusy={form.isBusy} actionLabel="Authorise" />
    </Form>
  )
}
