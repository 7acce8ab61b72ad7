import { certificateStates } from '@weirlight/shared/states'
import { Button } from 'antd'
import { useState } from 'react'
import { useNavigate } from 'react-router-dom'
import { paths, useCan, useNotice } from '../../../lib'
import { ConfirmDialog, ReasonDialog, SignDialog } from '../../../ui/dialogs'
import { useAmend, useSendAgain, useWithdraw, type CertificateView } from '../api/certificate-queries'

/** Amend, withdraw, send again: for whoever answers for certificates. */
export function CertificateActions({ certificate }: { certificate: CertificateView }) {
  const may = useCan()
  const notice = useNotice()
  const navigate = useNavigate()
  const [asked, setAsked] = useState<'amend' | 'withdraw' | 'send' | null>(null)
  const amend = useAmend()
  const withdraw = useWithdraw()
  const sendAgain = useSendAgain()
  if (!may('certificates.manage')) return null
  const { id, number, version, state, rendered } = certificate
  const params = { id }
  const close = () => setAsked(null)
  return (
    <>
      {state === 'issued' && rendered && <Button onClick={() => setAsked('send')}>Send again</Button>}
      {certificateStates.may(state, 'withdraw') && (
        <Button danger onClick={() => setAsked('withdraw')}>
          Withdraw
        </Button>
      )}
      {certificateStates.may(state, 'supersede') && <Button onClick={() => setAsked('amend')}>Amend</Button>}
      <SignDialog
        isOpen={asked === 'amend'}
        onClose={close}
        title={`Amend ${number}`}
        meaning="amended"
        consequences={[
          'A further certificate with its own number is made from the record as it stands now. It says what was, what is and why.',
          `${number} stays in the record as superseded and is not deleted. Everybody who got it gets the amendment.`,
        ]}
        note={{
          label: 'Reason, printed on the amendment',
          isRequired: true,
          hint: 'Kept in the history with your name.',
        }}
        actionLabel="Sign the amendment"
        onSign={async (passphrase, reason) => {
          const made = await amend.mutateAsync({ params, body: { passphrase, version, reason } })
          notice.done(`${made.number} replaces ${number}.`)
          void navigate(paths.certificate(made.id))
        }}
      />
      <ReasonDialog
        isOpen={asked === 'withdraw'}
        onClose={close}
        title={`Withdraw ${number}`}
        consequences={[
          'From now on the public check says that it is withdrawn. The document stays in the record.',
          'Everybody it was sent to is told by mail, with your reason. Nothing takes its place.',
        ]}
        actionLabel="Withdraw"
        isDangerous
        onConfirm={async (reason) => {
          await withdraw.mutateAsync({ params, body: { version, reason } })
          notice.done(`${number} is withdrawn; its recipients are told.`)
        }}
      />
      <ConfirmDialog
        isOpen={asked === 'send'}
        onClose={close}
        title={`Send ${number} again`}
        consequences={['The same document is mailed once more to the certificate contacts of the client.']}
        actionLabel="Send again"
        onConfirm={async () => {
          await sendAgain.mutateAsync({ params })
          notice.done(`${number} is on its way again.`)
        }}
      />
    </>
  )
}
