import {
  disableUser,
  enableUser,
  inviteUserAgain,
  startPassphraseReset,
  takeOffSecondFactor,
} from '@weirlight/shared/contracts'
import { Button } from 'antd'
import { useState } from 'react'
import { useCall, useCan, useNotice, useSession } from '../../../lib'
import { ConfirmDialog, ReasonDialog } from '../../../ui/dialogs'
import { FormDialog } from '../../../ui/form-dialog'
import { TOUCHES, type UserView } from '../api/user-queries'
import { mayBeAuthorised } from '../user-words'
import { AuthorisePerson, ChangePerson } from './person-forms'

type Asked = 'change' | 'authorise' | 'disable' | 'enable' | 'reset' | 'invite' | 'second-factor'

/** What an administrator may do with an account. */
export function PersonActions({ person }: { person: UserView }) {
  const may = useCan()
  const { userId } = useSession()
  const notice = useNotice()
  const [asked, setAsked] = useState<Asked | null>(null)
  const close = () => setAsked(null)
  const say = (text: string) => ({ invalidates: TOUCHES, onDone: () => notice.done(text) })
  const disable = useCall(disableUser, say(`${person.name} is disabled.`))
  const enable = useCall(enableUser, say(`${person.name} is enabled.`))
  const reset = useCall(startPassphraseReset, say(`A link is on its way to ${person.email}.`))
  const takeOff = useCall(takeOffSecondFactor, say(`${person.name} has no second factor any more.`))
  const invite = useCall(inviteUserAgain, say(`The invitation for ${person.email} is on its way again.`))
  if (!may('users.manage')) return null
  const params = { id: person.id }
  const { version } = person
  const isMe = person.id === userId
  return (
    <>
      <Button onClick={() => setAsked('change')}>Change</Button>
      {person.status === 'invited' && <Button onClick={() => setAsked('invite')}>Invite again</Button>}
      {person.status === 'active' && (
        <Button onClick={() => setAsked('reset')}>Send a new-passphrase link</Button>
      )}
      {person.secondFactorSince && !isMe && (
        <Button onClick={() => setAsked('second-factor')}>Take off the second factor</Button>
      )}
      {person.status === 'disabled' ? (
        <Button onClick={() => setAsked('enable')}>Enable</Button>
      ) : (
        !isMe && (
          <Button danger onClick={() => setAsked('disable')}>
            Disable
          </Button>
        )
      )}
      {mayBeAuthorised(person) && person.status !== 'disabled' && (
        <Button type="primary" onClick={() => setAsked('authorise')}>
          Authorise
        </Button>
      )}
      <FormDialog isOpen={asked === 'change'} onClose={close} title={`Change ${person.name}`}>
        <ChangePerson person={person} onDone={close} />
      </FormDialog>
      <FormDialog isOpen={asked === 'authorise'} onClose={close} title={`Authorise ${person.name}`}>
        <AuthorisePerson person={person} onDone={close} />
      </FormDialog>
      <ConfirmDialog
        isOpen={asked === 'invite'}
        onClose={close}
        title={`Invite ${person.name} again`}
        consequences={[`A new link is mailed to ${person.email}. The link sent before stops working.`]}
        actionLabel="Send it again"
        onConfirm={() => invite.mutateAsync({ params, body: { version } })}
      />
      <ReasonDialog
        isOpen={asked === 'reset'}
        onClose={close}
        title={`New passphrase for ${person.name}`}
        consequences={[
          `A link is mailed to ${person.email}. The passphrase of now works until another is chosen.`,
        ]}
        actionLabel="Mail the link"
        onConfirm={(reason) => reset.mutateAsync({ params, body: { version, reason } })}
      />
      <ReasonDialog
        isOpen={asked === 'second-factor'}
        onClose={close}
        title={`Take off the second factor of ${person.name}`}
        consequences={[
          'For somebody who has lost the device and the recovery codes. Make sure that it is they who ask.',
          `The passphrase alone signs them in until they set up another. They are signed out everywhere, and ${person.email} is told, with your reason.`,
        ]}
        actionLabel="Take it off"
        isDangerous
        onConfirm={(reason) => takeOff.mutateAsync({ params, body: { version, reason } })}
      />
      <ReasonDialog
        isOpen={asked === 'disable'}
        onClose={close}
        title={`Disable ${person.name}`}
        consequences={[
          'The person is signed out everywhere at once and cannot sign in again. What they did stays in the record.',
        ]}
        actionLabel="Disable"
        isDangerous
        onConfirm={(reason) => disable.mutateAsync({ params, body: { version, reason } })}
      />
      <ReasonDialog
        isOpen={asked === 'enable'}
        onClose={close}
        title={`Enable ${person.name}`}
        consequences={['The person can sign in again with the rights of the role.']}
        actionLabel="Enable"
        onConfirm={(reason) => enable.mutateAsync({ params, body: { version, reason } })}
      />
    </>
  )
}
