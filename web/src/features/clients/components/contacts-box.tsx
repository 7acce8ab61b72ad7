import {
  addContact,
  changeContact,
  removeContact,
  type BodyInput,
  type ClientView,
} from '@weirlight/shared/contracts'
import { Button, Checkbox, Form, Input } from 'antd'
import { useState } from 'react'
import { useCall, useCan, useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { Bar, Box, DataTable, MailAddress, type Column } from '../../../ui'
import { ReasonDialog } from '../../../ui/dialogs'
import { DialogFoot, FormDialog } from '../../../ui/form-dialog'
import { FormProblem } from '../../../ui/form-problem'
import { TOUCHES, type Contact } from '../api/client-queries'

type Values = BodyInput<typeof addContact>

const fresh = (contacts: readonly Contact[], asked: Contact) =>
  contacts.find((each) => each.id === asked.id) ?? asked

const yesNo = (is: boolean) => (is ? 'yes' : <span className="quiet">no</span>)

/** Who at the client is written to. */
export function ContactsBox({ client }: { client: ClientView }) {
  const may = useCan()
  const notice = useNotice()
  const [asked, setAsked] = useState<{ act: 'add' } | { act: 'change' | 'remove'; contact: Contact } | null>(
    null,
  )
  const close = () => setAsked(null)
  // as it stands now, should somebody change it while the dialogue is open
  const contact = asked && asked.act !== 'add' ? fresh(client.contacts, asked.contact) : null
  const mayManage = may('clients.manage')
  const remove = useCall(removeContact, {
    invalidates: TOUCHES,
    onDone: () => notice.done('Nothing more is written to this contact.'),
  })
  const columns: Column<Contact>[] = [
    { key: 'name', title: 'Name', text: (row) => row.name },
    { key: 'email', title: 'E-mail', cell: (row) => <MailAddress of={row.email} /> },
    { key: 'alerts', title: 'Gets alerts', cell: (row) => yesNo(row.getsAlerts) },
    { key: 'certificates', title: 'Gets certificates', cell: (row) => yesNo(row.getsCertificates) },
    {
      key: 'acts',
      title: <span className="visually-hidden">What can be done</span>,
      isNarrow: true,
      cell: (row) =>
        mayManage && (
          <span className="row">
            <Button size="small" onClick={() => setAsked({ act: 'change', contact: row })}>
              Change<span className="visually-hidden"> {row.name}</span>
            </Button>
            <Button size="small" danger onClick={() => setAsked({ act: 'remove', contact: row })}>
              Remove<span className="visually-hidden"> {row.name}</span>
            </Button>
          </span>
        ),
    },
  ]
  return (
    <Box>
      <Bar
        lead={<h2>Contacts</h2>}
        actions={mayManage && <Button onClick={() => setAsked({ act: 'add' })}>Add a contact</Button>}
      />
      <DataTable
        label="Contacts"
        rows={client.contacts}
        columns={columns}
        rowKey={(row) => row.id}
        empty={{ title: 'Nobody yet', text: 'Alerts and certificates go to contacts.' }}
      />
      <FormDialog isOpen={asked?.act === 'add'} onClose={close} title={`Add a contact of ${client.name}`}>
        <ContactForm client={client} contact={null} onDone={close} />
      </FormDialog>
      <FormDialog isOpen={asked?.act === 'change'} onClose={close} title="Change the contact">
        {contact && <ContactForm client={client} contact={contact} onDone={close} />}
      </FormDialog>
      {asked?.act === 'remove' && contact && (
        <ReasonDialog
          isOpen
          onClose={close}
          title={`Stop writing to ${contact.name}`}
          consequences={[
            `${contact.email} gets no more alerts and no more certificates. What was sent stays in the record.`,
          ]}
          actionLabel="Stop writing"
          isDangerous
          onConfirm={(reason) =>
            remove.mutateAsync({
              params: { id: contact.id },
              body: { version: contact.version, reason },
            })
          }
        />
      )}
    </Box>
  )
}

interface ContactFormProps {
  client: ClientView
  contact: Contact | null
  onDone: () => void
}

function ContactForm(props: ContactFormProps) {
  return props.contact ? <ChangeForm {...props} contact={props.contact} /> : <AddForm {...props} />
}

const valuesOf = (values: Partial<Values>) => ({
  name: values.name ?? '',
  email: values.email ?? '',
  getsAlerts: values.getsAlerts ?? false,
  getsCertificates: values.getsCertificates ?? false,
})

function AddForm({ client, onDone }: ContactFormProps) {
  const notice = useNotice()
  const form = useEndpointForm<typeof addContact, Values>({
    endpoint: addContact,
    toInput: (values) => ({ params: { id: client.id }, body: valuesOf(values) }),
    invalidates: TOUCHES,
    onDone: () => {
      notice.done('The contact is added.')
      onDone()
    },
  })
  return (
    <Form layout="vertical" initialValues={{ getsAlerts: true, getsCertificates: true }} {...form.formProps}>
      <FormProblem form={form} />
      <ContactFields />
      <DialogFoot onCancel={onDone} isBusy={form.isBusy} actionLabel="Add the contact" />
    </Form>
  )
}

function ChangeForm({ contact, onDone }: ContactFormProps & { contact: Contact }) {
  const notice = useNotice()
  const form = useEndpointForm<typeof changeContact, Values>({
    endpoint: changeContact,
    toInput: (values) => ({
      params: { id: contact.id },
      body: { ...valuesOf(values), version: contact.version },
    }),
    invalidates: TOUCHES,
    basedOn: contact.version,
    onDone: () => {
      notice.done('The contact is changed.')
      onDone()
    },
  })
  return (
    <Form layout="vertical" initialValues={contact} {...form.formProps}>
      <FormProblem form={form} />
      <p className="note dialog-words">A changed address is told to the old one too.</p>
      <ContactFields />
      <DialogFoot onCancel={onDone} isBusy={form.isBusy} actionLabel="Change it" />
    </Form>
  )
}

function ContactFields() {
  return (
    <>
      <Form.Item name="name" label="Name" required>
        <Input autoComplete="off" />
      </Form.Item>
      <Form.Item name="email" label="E-mail" required>
        <Input autoComplete="off" inputMode="email" />
      </Form.Item>
      <Form.Item name="getsAlerts" valuePropName="checked" noStyle>
        <Checkbox>Gets alerts</Checkbox>
      </Form.Item>
      <Form.Item name="getsCertificates" valuePropName="checked">
        <Checkbox>Gets certificates</Checkbox>
      </Form.Item>
    </>
  )
}
