import { ROLE_NAMES } from '@weirlight/shared/permissions'
import { OwnSecondFactor } from '../../features/second-factor'
import { useLaboratoryTime, useSession } from '../../lib'
import { MailAddress, MarginPage } from '../../ui'

export function AccountPage() {
  const { name, email, role, clientName, laboratoryName, signedInAt, endsAt } = useSession()
  const { at } = useLaboratoryTime()
  return (
    <MarginPage
      title="Your account"
      subtitle={name}
      foldLabel="The account"
      facts={[
        { term: 'E-mail', detail: <MailAddress of={email} /> },
        { term: 'Role', detail: `${ROLE_NAMES[role]}, ${laboratoryName}` },
        clientName && { term: 'Utility', detail: clientName },
        { term: 'Signed in', detail: at(signedInAt) },
        { term: 'Signed out at the latest', detail: at(endsAt) },
      ]}
      notes={[
        'The laboratory’s administrator changes name and role. A new passphrase: sign out, then “I do not know my passphrase”.',
      ]}
    >
      <OwnSecondFactor />
    </MarginPage>
  )
}
