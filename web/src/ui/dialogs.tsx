import { LIMITS } from '@weirlight/shared/limits'
import { Button, Form, Input, Modal } from 'antd'
import { useState, type ReactNode } from 'react'
import { clearProblems, placeProblems } from '../lib/form-issues'
import { asProblem, type ProblemError } from '../lib/problem-error'
import { LoadAgain } from './load-again'
import { Strip } from './sheet'

interface DialogProps {
  isOpen: boolean
  onClose: () => void
  title: string
  /** what will happen, in words, one sentence each */
  consequences?: readonly ReactNode[]
  actionLabel: string
  cancelLabel?: string
  isDangerous?: boolean
}

interface ActDialogProps<Values extends object> extends DialogProps {
  act: (values: Values) => unknown
  /** the field that a complaint without a path belongs to, by its code */
  fieldOf?: (problem: ProblemError) => string | null
  /** a signature covers what was on the page: once that is read again, it is looked at before signing */
  closesOnLoad?: boolean
  children?: ReactNode
}

/** The frame of every binding act: says what will happen, waits for the server, closes only when it is done. */
function ActDialog<Values extends object>(props: ActDialogProps<Values>) {
  const { isOpen, onClose, title, consequences = [], actionLabel, isDangerous = false, act, fieldOf } = props
  const [form] = Form.useForm<Values>()
  const [isBusy, setBusy] = useState(false)
  const [sentences, setSentences] = useState<readonly string[]>([])
  const [staleness, setStaleness] = useState<'stale' | 'loaded' | null>(null)
  const close = () => {
    if (isBusy) return
    setSentences([])
    setStaleness(null)
    onClose()
  }
  const loadedAgain = () => {
    if (props.closesOnLoad) return close()
    setSentences([])
    setStaleness('loaded')
  }
  const submit = async (values: Values) => {
    if (isBusy) return
    setBusy(true)
    setSentences([])
    setStaleness(null)
    try {
      await act(values)
      setBusy(false)
      onClose()
    } catch (error) {
      setBusy(false)
      const problem = asProblem(error)
      const field = fieldOf?.(problem)
      if (field) {
        placeProblems(form, [{ path: field, message: problem.message }])
        return
      }
      if (problem.code === 'stale') setStaleness('stale')
      const homeless = placeProblems(form, problem.errors)
      setSentences(problem.errors.length > 0 ? homeless : [problem.message])
    }
  }
  return (
    <Modal
      open={isOpen}
      onCancel={close}
      title={title}
      destroyOnHidden
      mask={{ closable: false }}
      width={480}
      footer={null}
    >
      <Form
        form={form}
        layout="vertical"
        onFinish={(values) => void submit(values)}
        onValuesChange={(changed) => clearProblems(form, changed)}
        preserve={false}
        requiredMark={false}
      >
        {consequences.length > 0 && (
          <div className="stack dialog-words">
            {consequences.map((sentence, index) => (
              <p key={index}>{sentence}</p>
            ))}
          </div>
        )}
        {sentences.length > 0 && (
          <Strip tone="above" isAlert action={staleness === 'stale' && <LoadAgain onLoaded={loadedAgain} />}>
            {sentences.join(' ')}
          </Strip>
        )}
        {staleness === 'loaded' && (
          <Strip tone="quiet" isAlert>
            Loaded again. If it is still right, go on; if not, cancel and look at the page.
          </Strip>
        )}
        {props.children}
        <div className="row dialog-foot">
          <Button onClick={close} disabled={isBusy}>
            {props.cancelLabel ?? 'Cancel'}
          </Button>
          <Button type="primary" danger={isDangerous} htmlType="submit" loading={isBusy}>
            {actionLabel}
          </Button>
        </div>
      </Form>
    </Modal>
  )
}

interface NoteField {
  label: string
  isRequired?: boolean
  hint?: string
}

interface SignDialogProps extends DialogProps {
  /** the meaning of the signature, as it is stored and printed */
  meaning: string
  note?: NoteField
  onSign: (passphrase: string, note: string) => unknown
}

const passphraseField = (problem: ProblemError) => (problem.code === 'wrong-passphrase' ? 'passphrase' : null)

/** A signature: says what it means and what follows, and asks for the passphrase again. */
export function SignDialog({ meaning, note, onSign, ...rest }: SignDialogProps) {
  return (
    <ActDialog<{ passphrase: string; note?: string }>
      {...rest}
      act={(values) => onSign(values.passphrase, values.note ?? '')}
      fieldOf={passphraseField}
      closesOnLoad
    >
      <p className="dialog-words">
        Your signature means <strong>{meaning}</strong>. It carries your name and the time, and covers exactly
        what is on this page.
      </p>
      {note && (
        <Form.Item
          name="note"
          label={note.label}
          extra={note.hint}
          rules={
            note.isRequired ? [{ required: true, whitespace: true, message: 'Please fill this in.' }] : []
          }
        >
          <Input.TextArea rows={2} maxLength={LIMITS.noteLength} />
        </Form.Item>
      )}
      <Form.Item
        name="passphrase"
        label="Your passphrase"
        rules={[{ required: true, message: 'Enter your passphrase.' }]}
      >
        <Input.Password autoComplete="current-password" autoFocus />
      </Form.Item>
    </ActDialog>
  )
}

interface ReasonDialogProps extends DialogProps {
  label?: string
  onConfirm: (reason: string) => unknown
}

/** An act that needs a reason; the reason is kept in the history. */
export function ReasonDialog({ label = 'Reason', onConfirm, ...rest }: ReasonDialogProps) {
  return (
    <ActDialog<{ reason: string }> {...rest} act={(values) => onConfirm(values.reason)}>
      <Form.Item
        name="reason"
        label={label}
        extra="Kept in the history with your name."
        rules={[
          {
            required: true,
            whitespace: true,
            min: LIMITS.reasonMinimum,
            message: 'Give the reason in a few words; it is kept in the history.',
          },
        ]}
      >
        <Input.TextArea rows={3} maxLength={LIMITS.reasonLength} autoFocus />
      </Form.Item>
    </ActDialog>
  )
}

interface ConfirmDialogProps extends DialogProps {
  onConfirm: () => unknown
  children?: ReactNode
}

export function ConfirmDialog({ onConfirm, children, ...rest }: ConfirmDialogProps) {
  return (
    <ActDialog {...rest} act={() => onConfirm()}>
      {children}
    </ActDialog>
  )
}
