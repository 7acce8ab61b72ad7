import { addPoint, changePoint, type BodyInput, type ClientView } from '@weirlight/shared/contracts'
import { Button, Checkbox, Form, Input } from 'antd'
import { useState } from 'react'
import { Link } from 'react-router-dom'
import { paths, useCan, useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { Bar, Box, DataTable, SelectInput, StatusTag, type Column } from '../../../ui'
import { DialogFoot, FormDialog } from '../../../ui/form-dialog'
import { FormProblem } from '../../../ui/form-problem'
import { TOUCHES, type SamplingPoint } from '../api/client-queries'
import { activeMark, POINT_KIND_OPTIONS, POINT_KINDS } from '../client-words'

type NewPoint = BodyInput<typeof addPoint>
type Changed = BodyInput<typeof changePoint>

/** Where the client's samples come from. */
export function PointsBox({ client }: { client: ClientView }) {
  const may = useCan()
  const [asked, setAsked] = useState<'add' | SamplingPoint | null>(null)
  const close = () => setAsked(null)
  const mayManage = may('clients.manage')
  const columns: Column<SamplingPoint>[] = [
    { key: 'code', title: 'Code', text: (row) => row.code },
    { key: 'name', title: 'Sampling point', text: (row) => row.name },
    { key: 'kind', title: 'Water', text: (row) => POINT_KINDS[row.kind] },
    { key: 'state', title: 'State', onPhone: 'corner', cell: (row) => <StatusTag mark={activeMark(row)} /> },
    {
      key: 'acts',
      title: <span className="visually-hidden">What can be done</span>,
      isNarrow: true,
      cell: (row) => (
        <span className="row">
          {may('samples.read') && (
            <Link to={`${paths.receiving}?clientId=${client.id}&pointId=${row.id}`}>Samples</Link>
          )}
          {mayManage && (
            <Button size="small" onClick={() => setAsked(row)}>
              Change<span className="visually-hidden"> {row.code}</span>
            </Button>
          )}
        </span>
      ),
    },
  ]
  return (
    <Box>
      <Bar
        lead={<h2>Sampling points: {client.points.length}</h2>}
        actions={mayManage && <Button onClick={() => setAsked('add')}>Add a sampling point</Button>}
      />
      <DataTable
        label="Sampling points"
        rows={client.points}
        columns={columns}
        rowKey={(row) => row.id}
        empty={{ title: 'None yet', text: 'A sample always comes from one of the client’s points.' }}
      />
      <FormDialog isOpen={asked === 'add'} onClose={close} title={`Add a sampling point of ${client.name}`}>
        <AddPoint client={client} onDone={close} />
      </FormDialog>
      <FormDialog
        isOpen={asked !== null && asked !== 'add'}
        onClose={close}
        title="Change the sampling point"
      >
        {asked !== null && asked !== 'add' && (
          <ChangePoint point={client.points.find((each) => each.id === asked.id) ?? asked} onDone={close} />
        )}
      </FormDialog>
    </Box>
  )
}

function PointFields() {
  return (
    <>
      <Form.Item name="name" label="Name" required>
        <Input autoComplete="off" />
      </Form.Item>
      <Form.Item name="kind" label="Water" required>
        <SelectInput options={POINT_KIND_OPTIONS} />
      </Form.Item>
    </>
  )
}

function AddPoint({ client, onDone }: { client: ClientView; onDone: () => void }) {
  const notice = useNotice()
  const form = useEndpointForm<typeof addPoint, NewPoint>({
    endpoint: addPoint,
    toInput: (values) => ({
      params: { id: client.id },
      body: { ...values, code: values.code ?? '', name: values.name ?? '' },
    }),
    invalidates: TOUCHES,
    onDone: () => {
      notice.done('The sampling point is added.')
      onDone()
    },
  })
  return (
    <Form layout="vertical" {...form.formProps}>
      <FormProblem form={form} />
      <Form.Item name="code" label="Code" required extra="For labels, scanners and manifests. It stays.">
        <Input placeholder={`${client.code}-07`} autoComplete="off" />
      </Form.Item>
      <PointFields />
      <DialogFoot onCancel={onDone} isBusy={form.isBusy} actionLabel="Add the point" />
    </Form>
  )
}

function ChangePoint({ point, onDone }: { point: SamplingPoint; onDone: () => void }) {
  const notice = useNotice()
  const form = useEndpointForm<typeof changePoint, Changed>({
    endpoint: changePoint,
    toInput: (values) => ({ params: { id: point.id }, body: { ...values, version: point.version } }),
    invalidates: TOUCHES,
    basedOn: point.version,
    onDone: () => {
      notice.done(`${point.code} is changed.`)
      onDone()
    },
  })
  return (
    <Form layout="vertical" initialValues={point} {...form.formProps}>
      <FormProblem form={form} />
      <p className="dialog-words">
        Code <strong>{point.code}</strong>
      </p>
      <PointFields />
      <Form.Item name="active" valuePropName="checked">
        <Checkbox>In use: samples may be received from it</Checkbox>
      </Form.Item>
      <DialogFoot onCancel={onDone} isBusy={form.isBusy} actionLabel="Change it" />
    </Form>
  )
}
