import { Button, Modal } from 'antd'
import type { ReactNode } from 'react'

interface FormDialogProps {
  isOpen: boolean
  onClose: () => void
  title: string
  /** drawn while it is open: a form of its own */
  children: ReactNode
}

/** A short form over the page. The form itself says when it is done. */
export function FormDialog({ isOpen, onClose, title, children }: FormDialogProps) {
  return (
    <Modal
      open={isOpen}
      onCancel={onClose}
      title={title}
      destroyOnHidden
      mask={{ closable: false }}
      width={560}
      footer={null}
    >
      {isOpen && children}
    </Modal>
  )
}

/** The last line of such a form. */
export function DialogFoot(props: { onCancel: () => void; isBusy: boolean; actionLabel: string }) {
  return (
    <div className="row dialog-foot">
      <Button onClick={props.onCancel} disabled={props.isBusy}>
        Cancel
      </Button>
      <Button type="primary" htmlType="submit" loading={props.isBusy}>
        {props.actionLabel}
      </Button>
    </div>
  )
}
