import { addInstrument, listInstruments, type BodyInput } from '@weirlight/shared/contracts'
import { Button, Form, Input } from 'antd'
import { useNavigate } from 'react-router-dom'
import { paths, useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { Box } from '../../../ui'
import { DecimalInput } from '../../../ui/decimal-input'
import { FormProblem } from '../../../ui/form-problem'

type Values = BodyInput<typeof addInstrument>

export function AddInstrument() {
  const navigate = useNavigate()
  const notice = useNotice()
  const form = useEndpointForm<typeof addInstrument, Values>({
    endpoint: addInstrument,
    toInput: (values) => ({
      body: { ...values, serial: values.serial ?? '', bandwidthNm: values.bandwidthNm ?? '' },
    }),
    invalidates: [listInstruments],
    draft: 'instrument-new',
    onDone: async (made) => {
      notice.done(`${made.number} is recorded. Record its first check before anything is read on it.`)
      await navigate(paths.instrument(made.id))
    },
  })
  return (
    <Form layout="vertical" {...form.formProps}>
      <FormProblem form={form} />
      <Box title="The instrument">
        <div className="form-grid">
          <Form.Item name="name" label="Name" required extra="As people here call it.">
            <Input placeholder="Spectrophotometer 3" autoComplete="off" />
          </Form.Item>
          <Form.Item name="kind" label="Kind" required>
            <Input placeholder="Double-beam spectrophotometer" autoComplete="off" />
          </Form.Item>
          <Form.Item name="serial" label="Serial number">
            <Input autoComplete="off" />
          </Form.Item>
          <Form.Item name="location" label="Stands in" required>
            <Input autoComplete="off" />
          </Form.Item>
          <Form.Item name="bandwidthNm" label="Spectral bandwidth, nm" required>
            <DecimalInput />
          </Form.Item>
        </div>
        <div className="row">
          <Button type="primary" htmlType="submit" loading={form.isBusy}>
            Add the instrument
          </Button>
        </div>
      </Box>
    </Form>
  )
}
