import { useQuery } from '@tanstack/react-query'
import {
  addClient,
  changeClient,
  listProgrammes,
  type BodyInput,
  type ClientView,
} from '@weirlight/shared/contracts'
import { Button, Form, Input } from 'antd'
import { useNavigate } from 'react-router-dom'
import { paths, queryFor, useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { Box, SelectInput } from '../../../ui'
import { DialogFoot } from '../../../ui/form-dialog'
import { FormProblem } from '../../../ui/form-problem'
import { TOUCHES } from '../api/client-queries'

type NewClient = BodyInput<typeof addClient>
type Changed = BodyInput<typeof changeClient>

function ParticularFields() {
  const programmes = useQuery(queryFor(listProgrammes))
  return (
    <>
      <Form.Item name="name" label="Name" required className="wide">
        <Input autoComplete="off" />
      </Form.Item>
      <Form.Item
        name="programmeId"
        label="Programme"
        required
        className="wide"
        extra="Its limits and rounding are used for this client’s results from now on."
      >
        <SelectInput
          options={(programmes.data?.items ?? []).map((each) => ({ value: each.id, label: each.name }))}
        />
      </Form.Item>
      <Form.Item name="systemId" label="System number" extra="As the agency knows the water system.">
        <Input autoComplete="off" />
      </Form.Item>
      <Form.Item name="address" label="Address">
        <Input autoComplete="off" />
      </Form.Item>
      <Form.Item name="agencyName" label="Agency" required>
        <Input autoComplete="off" />
      </Form.Item>
      <Form.Item name="agencyPhone" label="Agency’s telephone" required>
        <Input autoComplete="off" inputMode="tel" />
      </Form.Item>
    </>
  )
}

const texts = (values: Partial<NewClient>) => ({
  name: values.name ?? '',
  systemId: values.systemId ?? '',
  address: values.address ?? '',
  programmeId: values.programmeId ?? '',
  agencyName: values.agencyName ?? '',
  agencyPhone: values.agencyPhone ?? '',
})

export function AddClient() {
  const navigate = useNavigate()
  const notice = useNotice()
  const form = useEndpointForm<typeof addClient, NewClient>({
    endpoint: addClient,
    toInput: (values) => ({ body: { ...texts(values), code: values.code ?? '' } }),
    invalidates: TOUCHES,
    draft: 'client-new',
    onDone: async (client) => {
      notice.done(`${client.name} is recorded. Add its sampling points and contacts.`)
      await navigate(paths.client(client.id))
    },
  })
  return (
    <Form layout="vertical" {...form.formProps}>
      <FormProblem form={form} />
      <Box title="The client">
        <div className="form-grid">
          <Form.Item name="code" label="Code" required extra="Short, for labels and manifests. It stays.">
            <Input placeholder="PH" autoComplete="off" />
          </Form.Item>
          <ParticularFields />
        </div>
        <Button type="primary" htmlType="submit" loading={form.isBusy}>
          Add the client
        </Button>
      </Box>
    </Form>
  )
}

export function ChangeClient({ client, onDone }: { client: ClientView; onDone: () => void }) {
  const notice = useNotice()
  const form = useEndpointForm<typeof changeClient, Changed>({
    endpoint: changeClient,
    toInput: (values) => ({
      params: { id: client.id },
      body: {
        ...texts(values),
        version: client.version,
        ...(values.reason ? { reason: values.reason } : {}),
      },
    }),
    invalidates: TOUCHES,
    basedOn: client.version,
    onDone: () => {
      notice.done('The particulars are changed.')
      onDone()
    },
  })
  return (
    <Form layout="vertical" initialValues={client} {...form.formProps}>
      <FormProblem form={form} />
      <div className="form-grid">
        <ParticularFields />
        <Form.Item name="reason" label="Why, in a few words (may stay empty)" className="wide">
          <Input autoComplete="off" />
        </Form.Item>
      </div>
      <DialogFoot onCancel={onDone} isBusy={form.isBusy} actionLabel="Change it" />
    </Form>
  )
}
