import { recordCheck, type BodyInput } from '@weirlight/shared/contracts'
import { Form, Input } from 'antd'
import { useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { SelectInput, StatusTag } from '../../../ui'
import { DecimalInput } from '../../../ui/decimal-input'
import { DialogFoot } from '../../../ui/form-dialog'
import { FormProblem } from '../../../ui/form-problem'
import { DayInput } from '../../../ui/time-inputs'
import { TOUCHES, type InstrumentView } from '../api/instrument-queries'
import { isWithinTolerance } from '../check-outcome'
import { CHECK_UNITS, CHECK_WORDS, FAILED, PASSED } from '../instrument-words'

type Values = BodyInput<typeof recordCheck>

const KINDS = (['wavelength', 'photometric', 'stray-light', 'baseline'] as const).map((value) => ({
  value,
  label: CHECK_WORDS[value],
}))
const UNITS = (['nm', 'A', '%T'] as const).map((value) => ({ value, label: value }))

/** A check as it was read; whether it passed is said before it is sent. */
export function RecordCheck({ instrument, onDone }: { instrument: InstrumentView; onDone: () => void }) {
  const notice = useNotice()
  const form = useEndpointForm<typeof recordCheck, Values>({
    endpoint: recordCheck,
    toInput: (values) => ({ params: { id: instrument.id }, body: { ...values, note: values.note ?? '' } }),
    invalidates: TOUCHES,
    onDone: (answer) => {
      const last = answer.checks[0]
      notice.done(last?.passed === false ? 'The check failed: it is out of use.' : 'The check is recorded.')
      onDone()
    },
  })
  const [nominal, found, tolerance] = [
    Form.useWatch('nominal', form.form),
    Form.useWatch('found', form.form),
    Form.useWatch('tolerance', form.form),
  ]
  const isWithin = isWithinTolerance({ nominal, found, tolerance })
  return (
    <Form layout="vertical" {...form.formProps}>
      <FormProblem form={form} />
      <div className="form-grid">
        <Form.Item name="kind" label="Check" required>
          <SelectInput
            options={KINDS}
            onChange={(kind) => {
              if (kind) form.form.setFieldsValue({ unit: CHECK_UNITS[kind as Values['kind']] })
            }}
          />
        </Form.Item>
        <Form.Item name="reference" label="Against" required>
          <Input placeholder="Didymium filter D-2" autoComplete="off" />
        </Form.Item>
        <Form.Item name="nominal" label="Nominal" required>
          <DecimalInput />
        </Form.Item>
        <Form.Item name="found" label="Found" required>
          <DecimalInput />
        </Form.Item>
        <Form.Item name="tolerance" label="Tolerance, either side" required>
          <DecimalInput />
        </Form.Item>
        <Form.Item name="unit" label="Unit" required>
          <SelectInput options={UNITS} />
        </Form.Item>
        <Form.Item name="nextDueOn" label="Next check due on" required>
          <DayInput />
        </Form.Item>
        <Form.Item name="note" label="Note" className="wide">
          <Input.TextArea autoSize={{ minRows: 1, maxRows: 4 }} />
        </Form.Item>
      </div>
      {isWithin !== null && (
        <p>
          <StatusTag mark={isWithin ? PASSED : FAILED}>
            {isWithin
              ? 'Within the tolerance: passed.'
              : 'Outside the tolerance: the instrument goes out of use.'}
          </StatusTag>
        </p>
      )}
      <DialogFoot onCancel={onDone} isBusy={form.isBusy} actionLabel="Record the check" />
    </Form>
  )
}
