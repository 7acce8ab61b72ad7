import { getBatch, recordFindingAction, type BatchView } from '@weirlight/shared/contracts'
import { Button, Form, Input, Modal, Radio } from 'antd'
import { useState } from 'react'
import { useLaboratoryTime } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { Box } from '../../../ui'
import { FormProblem } from '../../../ui/form-problem'
import { MarkShape } from '../../../ui'
import type { BatchFinding } from '../api/batch-queries'

type ActionKind = NonNullable<BatchFinding['action']>['kind']

export const ACTION_WORDS: Record<ActionKind, string> = {
  'read-again': 'Read again',
  flagged: 'Results flagged',
  explained: 'Explained',
  rerun: 'To be measured again in another batch',
}

interface FindingsBoxProps {
  findings: readonly BatchFinding[]
  /** left out: what was done is shown, and nothing can be added */
  act?: {
    batchId: string
    take: (batch: BatchView) => void
    goTo: (positionId: string) => void
    /** findings of readings that have not reached the server cannot be answered yet */
    isReady: boolean
  }
  title?: string
}

/** Failed checks first, then cautions, each with what was done about it. */
export function FindingsBox({ findings, act, title = 'Checks that need a word' }: FindingsBoxProps) {
  const { at } = useLaboratoryTime()
  const [asked, setAsked] = useState<BatchFinding | null>(null)
  if (findings.length === 0) return null
  return (
    <Box title={`${title}: ${findings.length}`}>
      <ul className="finding-list">
        {findings.map((finding) => {
          const isFailed = finding.severity === 'failed'
          return (
            <li key={finding.id}>
              <span className={`state is-${isFailed ? 'above' : 'caution'}`}>
                <MarkShape shape={isFailed ? 'triangle' : 'diamond'} />
                <span className="visually-hidden">{isFailed ? 'Failed:' : 'Caution:'}</span>
              </span>
              <div>
                {finding.what}
                {finding.action ? (
                  <div className="note">
                    {ACTION_WORDS[finding.action.kind]}: {finding.action.text} — {finding.action.by},{' '}
                    {at(finding.action.at)}
                  </div>
                ) : (
                  isFailed && <div className="note above">Nothing recorded yet about what was done.</div>
                )}
              </div>
              {act && (
                <div className="row finding-act no-print">
                  {finding.positionId && (
                    <button
                      type="button"
                      className="run-edit"
                      onClick={() => finding.positionId && act.goTo(finding.positionId)}
                    >
                      Go to position {finding.position}
                    </button>
                  )}
                  <button
                    type="button"
                    className="button"
                    disabled={!act.isReady}
                    title={act.isReady ? undefined : 'Once every reading is saved'}
                    onClick={() => setAsked(finding)}
                  >
                    {finding.action ? 'Say more' : 'Say what was done'}
                  </button>
                </div>
              )}
            </li>
          )
        })}
      </ul>
      {asked && act && (
        <ActionDialog
          finding={asked}
          batchId={act.batchId}
          onClose={() => setAsked(null)}
          onSaved={(batch) => act.take(batch)}
        />
      )}
    </Box>
  )
}

interface Values {
  kind: ActionKind
  text: string
}

function ActionDialog(props: {
  finding: BatchFinding
  batchId: string
  onClose: () => void
  onSaved: (batch: BatchView) => void
}) {
  const { finding, batchId, onClose, onSaved } = props
  const form = useEndpointForm<typeof recordFindingAction, Values>({
    endpoint: recordFindingAction,
    toInput: (values) => ({
      params: { id: batchId },
      body: { findingId: finding.id, ...values, text: values.text ?? '' },
    }),
    invalidates: [getBatch],
    onDone: (batch) => {
      onSaved(batch)
      onClose()
    },
  })
  return (
    <Modal open onCancel={onClose} title="What was done about it?" footer={null} width={480}>
      <p className="dialog-words">{finding.what}</p>
      <Form layout="vertical" initialValues={{ kind: 'explained' }} requiredMark={false} {...form.formProps}>
        <FormProblem form={form} />
        <Form.Item name="kind">
          <Radio.Group>
            {Object.entries(ACTION_WORDS).map(([value, word]) => (
              <div key={value}>
                <Radio value={value}>{word}</Radio>
              </div>
            ))}
          </Radio.Group>
        </Form.Item>
        <Form.Item
          name="text"
          label="In your words"
          extra="The reviewer reads this; it is kept in the record."
        >
          <Input.TextArea autoSize={{ minRows: 2, maxRows: 6 }} />
        </Form.Item>
        <div className="row">
          <Button type="primary" htmlType="submit" loading={form.isBusy}>
            Record it
          </Button>
          <Button onClick={onClose}>Cancel</Button>
        </div>
      </Form>
    </Modal>
  )
}
