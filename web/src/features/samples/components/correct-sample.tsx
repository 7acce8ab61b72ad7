import { correctSample, type BodyInput } from '@weirlight/shared/contracts'
import { Checkbox, Form, Input } from 'antd'
import { useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { SelectInput } from '../../../ui'
import { DecimalInput } from '../../../ui/decimal-input'
import { DialogFoot } from '../../../ui/form-dialog'
import { FormProblem } from '../../../ui/form-problem'
import { MomentInput } from '../../../ui/time-inputs'
import { TOUCHES, type SampleView } from '../api/sample-queries'
import { CONTAINERS, PRESERVATIONS } from '../sample-words'

type Values = Omit<BodyInput<typeof correctSample>, 'version'>

/** What was written down wrongly at receipt; what stood before is kept beside it. */
export function CorrectSample({ sample, onDone }: { sample: SampleView; onDone: () => void }) {
  const notice = useNotice()
  const form = useEndpointForm<typeof correctSample, Values>({
    endpoint: correctSample,
    toInput: (values) => ({
      params: { id: sample.id },
      body: { ...values, reason: values.reason ?? '', version: sample.version },
    }),
    invalidates: TOUCHES,
    basedOn: sample.version,
    onDone: () => {
      notice.done(`${sample.number} is corrected. Its holding times are computed again.`)
      onDone()
    },
  })
  const { collectedAt, collectedBy, preservation, ph, temperatureC, container } = sample
  const { filteredInField, condition, remarks } = sample
  return (
    <Form
      layout="vertical"
      initialValues={{
        collectedAt,
        collectedBy,
        preservation,
        ph,
        temperatureC,
        container,
        filteredInField,
        condition,
        remarks,
      }}
      {...form.formProps}
    >
      <FormProblem form={form} />
      <p className="note dialog-words">
        What stood before stays in the history. Purpose, client and point are fixed: a sample received for the
        wrong ones is rejected and received again.
      </p>
      <div className="form-grid">
        <Form.Item name="collectedAt" label="Collected" required>
          <MomentInput />
        </Form.Item>
        <Form.Item name="collectedBy" label="Collected by" required>
          <Input autoComplete="off" />
        </Form.Item>
        <Form.Item name="preservation" label="Preserved with" required>
          <SelectInput options={PRESERVATIONS} />
        </Form.Item>
        <Form.Item name="container" label="Container" required>
          <SelectInput options={CONTAINERS} />
        </Form.Item>
        <Form.Item name="ph" label="pH, as read">
          <DecimalInput />
        </Form.Item>
        <Form.Item name="temperatureC" label="Temperature, °C">
          <DecimalInput />
        </Form.Item>
        <Form.Item name="filteredInField" valuePropName="checked" className="wide">
          <Checkbox>Filtered in the field</Checkbox>
        </Form.Item>
        <Form.Item name="condition" label="Condition">
          <Input autoComplete="off" />
        </Form.Item>
        <Form.Item name="remarks" label="Remarks">
          <Input autoComplete="off" />
        </Form.Item>
        <Form.Item
          name="reason"
          label="Why it is corrected"
          required
          className="wide"
          extra="Kept in the history with your name."
        >
          <Input.TextArea autoSize={{ minRows: 2, maxRows: 4 }} />
        </Form.Item>
      </div>
      <DialogFoot onCancel={onDone} isBusy={form.isBusy} actionLabel="Correct it" />
    </Form>
  )
}
