import { changePosition, getBatch, type BatchView } from '@weirlight/shared/contracts'
import { Button, Form, Input, Modal } from 'antd'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { DecimalInput } from '../../../ui/decimal-input'
import { FormProblem } from '../../../ui/form-problem'
import type { PositionView } from '../api/batch-queries'
import { positionName } from '../run-sheet/cells'

interface Values {
  dilution: string
  note: string
  reason?: string
}

interface PositionDialogProps {
  row: PositionView
  field: 'dilution' | 'note'
  onClose: () => void
  onSaved: (batch: BatchView) => void
}

/** Dilution and note of one position. A dilution changed after reading changes the result, so it needs a reason. */
export function PositionDialog({ row, field, onClose, onSaved }: PositionDialogProps) {
  const form = useEndpointForm<typeof changePosition, Values>({
    endpoint: changePosition,
    toInput: ({ dilution, note, reason }) => ({
      params: { id: row.id },
      body: { version: row.version, dilution, note: note ?? '', ...(reason?.trim() ? { reason } : {}) },
    }),
    invalidates: [getBatch],
    basedOn: row.version,
    onDone: (batch) => {
      onSaved(batch)
      onClose()
    },
  })
  const dilution = Form.useWatch('dilution', form.form)
  const needsReason = row.readings.length > 0 && dilution !== undefined && dilution.trim() !== row.dilution
  return (
    <Modal
      open
      onCancel={onClose}
      title={`Dilution and note: ${positionName(row)}`}
      footer={null}
      width={440}
    >
      <Form
        layout="vertical"
        initialValues={{ dilution: row.dilution, note: row.note }}
        requiredMark={false}
        {...form.formProps}
      >
        <FormProblem form={form} />
        <Form.Item
          name="dilution"
          label="Dilution factor"
          extra="1 when read as it came; 5 for 10 mL made up to 50 mL."
        >
          <DecimalInput autoFocus={field === 'dilution'} />
        </Form.Item>
        {needsReason && (
          <Form.Item
            name="reason"
            label="Why does it change after reading?"
            rules={[{ required: true, whitespace: true, min: 3, message: 'Give the reason in a few words.' }]}
          >
            <Input />
          </Form.Item>
        )}
        <Form.Item name="note" label="Note">
          <Input.TextArea autoSize={{ minRows: 2, maxRows: 6 }} autoFocus={field === 'note'} />
        </Form.Item>
        <div className="row">
          <Button type="primary" htmlType="submit" loading={form.isBusy}>
            Save
          </Button>
          <Button onClick={onClose}>Cancel</Button>
        </div>
      </Form>
    </Modal>
  )
}
