import {
  copyCalibration,
  getCalibration,
  invalidateCalibration,
  listCalibrations,
  sendBackCalibration,
  signCalibration,
  type CalibrationView,
} from '@weirlight/shared/contracts'
import { calibrationStates } from '@weirlight/shared/states'
import { Button } from 'antd'
import { useState } from 'react'
import { useNavigate } from 'react-router-dom'
import { paths, useCall, useCan, useNotice } from '../../../lib'
import { ReasonDialog, SignDialog } from '../../../ui/dialogs'

const TOUCHES = [getCalibration, listCalibrations]

/** What this person may do with a calibration that is no draft. */
export function CalibrationActions({ view }: { view: CalibrationView }) {
  const may = useCan()
  const notice = useNotice()
  const navigate = useNavigate()
  const [asked, setAsked] = useState<'sign' | 'send-back' | 'invalidate' | null>(null)
  const [draftId] = useState(() => crypto.randomUUID())
  const sign = useCall(signCalibration, {
    invalidates: TOUCHES,
    onDone: () => notice.done(`${view.number} is in force.`),
  })
  const sendBack = useCall(sendBackCalibration, {
    invalidates: TOUCHES,
    onDone: () => notice.done(`${view.number} was sent back.`),
  })
  const invalidate = useCall(invalidateCalibration, {
    invalidates: TOUCHES,
    onDone: () => notice.done(`${view.number} carries no more results.`),
  })
  const copy = useCall(copyCalibration, {
    invalidates: [listCalibrations],
    onDone: (made) => navigate(paths.calibration(made.id)),
  })
  const isToSign = calibrationStates.may(view.state, 'sign')
  const mayAct = may('calibrations.sign')
  const maySign = may('calibrations.sign', { preparedBy: view.preparedBy.id })
  const params = { id: view.id }
  const failed = view.criteria.filter((criterion) => criterion.outcome === 'fail')
  const close = () => setAsked(null)
  return (
    <>
      <Button onClick={() => window.print()}>Print</Button>
      {may('calibrations.prepare') && view.state !== 'submitted' && (
        <Button
          type={view.state === 'rejected' ? 'primary' : 'default'}
          loading={copy.isPending}
          onClick={() => copy.mutate({ params, body: { draftId } })}
        >
          {view.state === 'rejected' ? 'Start over from a copy' : 'New one with this set-up'}
        </Button>
      )}
      {mayAct && calibrationStates.may(view.state, 'invalidate') && (
        <Button danger onClick={() => setAsked('invalidate')}>
          Take out of force
        </Button>
      )}
      {mayAct && isToSign && <Button onClick={() => setAsked('send-back')}>Send back</Button>}
      {isToSign && maySign && (
        <Button type="primary" onClick={() => setAsked('sign')}>
          Sign for use
        </Button>
      )}
      {isToSign && mayAct && !maySign && (
        <span className="note">You prepared it: somebody else must sign.</span>
      )}
      <SignDialog
        isOpen={asked === 'sign'}
        onClose={close}
        title={`Sign ${view.number} for use`}
        meaning="accepted for use"
        consequences={[
          'From now on results are computed with it, until it expires or is replaced.',
          'A calibration now in force for the same method, instrument and cell is replaced by it.',
          ...(failed.length > 0 ? [`Not met: ${failed.map((each) => each.what).join('; ')}.`] : []),
        ]}
        actionLabel="Sign for use"
        note={
          failed.length > 0
            ? {
                label: 'Why it may be used although criteria are not met',
                isRequired: true,
                hint: 'Kept with the signature.',
              }
            : { label: 'Remark (may stay empty)' }
        }
        onSign={(passphrase, justification) =>
          sign.mutateAsync({ params, body: { passphrase, version: view.version, justification } })
        }
      />
      <ReasonDialog
        isOpen={asked === 'send-back'}
        onClose={close}
        title={`Send ${view.number} back`}
        consequences={[
          `${view.preparedBy.name} reads your reason and starts over from a copy. This one stays in the record.`,
        ]}
        actionLabel="Send back"
        onConfirm={(reason) => sendBack.mutateAsync({ params, body: { version: view.version, reason } })}
      />
      <ReasonDialog
        isOpen={asked === 'invalidate'}
        onClose={close}
        title={`Take ${view.number} out of force`}
        consequences={[
          'No batch can be opened with it any more. Batches already read with it keep their results and are listed below the standards, for you to judge.',
        ]}
        actionLabel="Take out of force"
        isDangerous
        onConfirm={(reason) => invalidate.mutateAsync({ params, body: { version: view.version, reason } })}
      />
    </>
  )
}
