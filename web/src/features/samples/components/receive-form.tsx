import { listSamples, listWaiting, receiveSample } from '@weirlight/shared/contracts'
import { Button, Checkbox, Form, Input, Radio } from 'antd'
import { useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { Box, Columns, KeyHints, Strip } from '../../../ui'
import { DecimalInput } from '../../../ui/decimal-input'
import { FormProblem } from '../../../ui/form-problem'
import { MomentInput } from '../../../ui/time-inputs'
import type { SampleView } from '../api/sample-queries'
import { useEnterMoves } from '../hooks/use-enter-moves'
import { bodyOf, type ReceiveValues } from '../receive/receive-values'
import { CONTAINERS, KINDS, PRESERVATIONS, PURPOSES } from '../sample-words'
import { DeterminationPicker } from './determination-picker'
import { ReceiveOutlook } from './receive-outlook'
import { WhereFrom } from './where-from'
import './samples.css'

interface ReceiveFormProps {
  first: ReceiveValues
  /** one more bottle of a round: client and habits stand already */
  isNext: boolean
  onReceived: (sample: SampleView, sent: ReceiveValues) => void
}

export function ReceiveForm({ first, isNext, onReceived }: ReceiveFormProps) {
  const notice = useNotice()
  const form = useEndpointForm<typeof receiveSample, ReceiveValues>({
    endpoint: receiveSample,
    toInput: (values) => ({ body: bodyOf(values) }),
    invalidates: [listSamples, listWaiting],
    draft: 'sample-new',
    onDone: (sample) => {
      notice.done(`Sample ${sample.number} received.`)
      onReceived(sample, form.form.getFieldsValue())
    },
  })
  const { frame, onKeyDown, moveOn } = useEnterMoves(() => form.form.submit())
  return (
    <Form layout="vertical" initialValues={first} {...form.formProps}>
      <FormProblem form={form} />
      {form.hasDraft && (
        <Strip tone="quiet" action={<Button onClick={form.discardDraft}>Start afresh</Button>}>
          What you had entered before is back in the form. It was not received yet.
        </Strip>
      )}
      <div ref={frame} onKeyDown={onKeyDown}>
        <Columns side={<ReceiveOutlook />}>
          <Form.Item name="draftId" hidden>
            <Input />
          </Form.Item>
          <WhereFrom isNext={isNext} moveOn={moveOn} />
          <WhatItIs />
          <WhenAndWho />
          <HowItCame />
          <Box title="Determinations">
            <Form.Item name="determinations">
              <DeterminationPicker />
            </Form.Item>
          </Box>
          <div>
            <div className="row">
              <Button type="primary" htmlType="submit" loading={form.isBusy}>
                Receive the sample
              </Button>
              <span className="note">It gets its number, and the checks are shown for your decision.</span>
            </div>
            <div className="box-foot">
              <KeyHints
                hints={[
                  ['Enter', 'next field, also from a scanner'],
                  ['Space', 'chooses'],
                  ['Ctrl Enter', 'receives the sample'],
                ]}
              />
            </div>
          </div>
        </Columns>
      </div>
    </Form>
  )
}

function WhatItIs() {
  return (
    <Box title="What it is">
      <div className="form-row">
        <Form.Item
          name="purpose"
          label="Purpose"
          required
          extra="Fixed with the receipt: it decides what is checked."
        >
          <Radio.Group options={PURPOSES} optionType="button" buttonStyle="solid" />
        </Form.Item>
        <Form.Item name="kind" label="Kind" required>
          <Radio.Group options={KINDS} optionType="button" buttonStyle="solid" />
        </Form.Item>
      </div>
    </Box>
  )
}

function WhenAndWho() {
  return (
    <Box title="Collected and received">
      <div className="form-grid">
        <Form.Item name="collectedAt" label="Collected" required>
          <MomentInput />
        </Form.Item>
        <Form.Item name="collectedBy" label="Collected by" required>
          <Input autoComplete="off" placeholder="Name, and for whom" />
        </Form.Item>
        <Form.Item name="receivedAt" label="Received" required>
          <MomentInput />
        </Form.Item>
      </div>
    </Box>
  )
}

function HowItCame() {
  return (
    <Box title="How it came">
      <div className="form-row">
        <Form.Item name="preservation" label="Preserved with" required>
          <Radio.Group options={PRESERVATIONS} optionType="button" buttonStyle="solid" />
        </Form.Item>
        <Form.Item name="container" label="Container" required>
          <Radio.Group options={CONTAINERS} optionType="button" buttonStyle="solid" />
        </Form.Item>
      </div>
      <div className="form-grid">
        <Form.Item name="ph" label="pH, as read" extra="Empty when it was not measured.">
          <DecimalInput />
        </Form.Item>
        <Form.Item name="temperatureC" label="Temperature, °C" extra="Empty when it was not measured.">
          <DecimalInput />
        </Form.Item>
        <Form.Item name="filteredInField" valuePropName="checked" className="wide">
          <Checkbox>Filtered in the field, for dissolved metal</Checkbox>
        </Form.Item>
        <Form.Item name="condition" label="Condition">
          <Input autoComplete="off" placeholder="Intact, label readable, clear" />
        </Form.Item>
        <Form.Item name="remarks" label="Remarks">
          <Input autoComplete="off" />
        </Form.Item>
      </div>
    </Box>
  )
}
