import { changeBatch, getBatch, type BatchView } from '@weirlight/shared/contracts'
import { Button, Form, Input, Modal } from 'antd'
import { useState } from 'react'
import { useCall, useLaboratoryTime } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { ReadingWindow, Refused } from '../../../ui'
import { FormProblem } from '../../../ui/form-problem'
import { MomentInput } from '../../../ui/time-inputs'

interface ColourClockProps {
  batch: BatchView
  isEditable: boolean
  take: (batch: BatchView) => void
}

/** When the colour reagent went in, and what that means for reading now. */
export function ColourClock({ batch, isEditable, take }: ColourClockProps) {
  const { clock, nowText, parse } = useLaboratoryTime()
  const [isOpen, setOpen] = useState(false)
  const start = useCall(changeBatch, { onDone: take, invalidates: [getBatch] })
  const begin = () => {
    const colourStartedAt = parse(nowText())
    if (!colourStartedAt) return
    start.mutate({
      params: { id: batch.id },
      body: { version: batch.version, colourStartedAt, note: batch.note },
    })
  }
  return (
    <>
      {batch.colourStartedAt && batch.colourWindow ? (
        <>
          <ReadingWindow startedAt={batch.colourStartedAt} {...batch.colourWindow} />
          <div className="note">reagent added {clock(batch.colourStartedAt).slice(0, 5)}</div>
        </>
      ) : (
        <span className="quiet">not started</span>
      )}
      {isEditable && (
        <div className="row no-print">
          {!batch.colourStartedAt && (
            <button type="button" className="button" disabled={start.isPending} onClick={begin}>
              Reagent added now
            </button>
          )}
          <button type="button" className="run-edit" onClick={() => setOpen(true)}>
            {batch.colourStartedAt ? 'Change time or note' : 'At another time'}
          </button>
        </div>
      )}
      <Refused problem={start.error} reset={start.reset} />
      {isOpen && <ColourDialog batch={batch} onClose={() => setOpen(false)} take={take} />}
    </>
  )
}

interface Values {
  colourStartedAt: string | null
  note: string
}

function ColourDialog(props: { batch: BatchView; onClose: () => void; take: (batch: BatchView) => void }) {
  const { batch, onClose, take } = props
  const form = useEndpointForm<typeof changeBatch, Values>({
    endpoint: changeBatch,
    toInput: ({ colourStartedAt, note }) => ({
      params: { id: batch.id },
      body: { version: batch.version, colourStartedAt: colourStartedAt || null, note: note ?? '' },
    }),
    invalidates: [getBatch],
    basedOn: batch.version,
    onDone: (answer) => {
      take(answer)
      onClose()
    },
  })
  return (
    <Modal open onCancel={onClose} title="Colour reagent and note of the batch" footer={null} width={440}>
      <Form
        layout="vertical"
        initialValues={{ colourStartedAt: batch.colourStartedAt, note: batch.note }}
        {...form.formProps}
      >
        <FormProblem form={form} />
        <Form.Item name="colourStartedAt" label="Colour reagent added">
          <MomentInput />
        </Form.Item>
        <Form.Item name="note" label="Note of the batch">
          <Input.TextArea autoSize={{ minRows: 2, maxRows: 6 }} />
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
