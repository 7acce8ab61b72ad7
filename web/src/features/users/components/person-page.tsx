import { useQuery } from '@tanstack/react-query'
import { ROLE_NAMES } from '@weirlight/shared/permissions'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Link } from 'react-router-dom'
import { paths, useCan, useLaboratoryTime } from '../../../lib'
import { Bar, Box, Loaded, MarginPage, NotFoundPage, StatusTag, Strip } from '../../../ui'
import { usersQuery, type UserView } from '../api/user-queries'
import { mayBeAuthorised, ROLE_HINTS } from '../user-words'
import { AuthorisationsOf } from './authorisations'
import { PersonActions } from './person-actions'

const LIST = { to: paths.settingsPeople, label: 'People' }

export function PersonById({ id }: { id: string }) {
  return (
    <Loaded query={useQuery(usersQuery)} skeleton="page" what="person" back={LIST}>
      {({ items }) => {
        const person = items.find((each) => each.id === id)
        return person ? <PersonPage person={person} /> : <NotFoundPage what="person" back={LIST} />
      }}
    </Loaded>
  )
}

function PersonPage({ person }: { person: UserView }) {
  const may = useCan()
  const { at } = useLaboratoryTime()
  const isAtTheBench = mayBeAuthorised(person)
  return (
    <MarginPage
      title={person.name}
      subtitle={person.email}
      back={LIST}
      state={<StatusTag mark={STATE_MARKS.user[person.status]} />}
      foldLabel="The account"
      facts={[
        { term: 'Role', detail: ROLE_NAMES[person.role] },
        person.clientName && { term: 'Utility', detail: person.clientName },
        { term: 'Account since', detail: at(person.createdAt) },
        {
          term: 'Last signed in',
          detail: person.lastSignedInAt ? at(person.lastSignedInAt) : 'never',
        },
        {
          term: 'Second factor',
          detail: person.secondFactorSince ? `since ${at(person.secondFactorSince)}` : 'none',
        },
        may('history.read') && {
          term: 'History',
          detail: (
            <>
              <Link to={`${paths.history}?actorId=${person.id}`}>What this person did</Link>
              <br />
              <Link to={`${paths.history}?thing=users&thingId=${person.id}`}>Changes to the account</Link>
            </>
          ),
        },
      ]}
      notes={['Passphrases are known to their owners alone. An account is never deleted: what it did stays.']}
      bar={
        <Bar
          lead={<h2>{isAtTheBench ? 'Authorisations' : 'What this account sees'}</h2>}
          actions={<PersonActions person={person} />}
        />
      }
    >
      {person.status === 'disabled' && (
        <Strip tone="quiet" title="Disabled">
          This account can do nothing. What it did stays in the record under its name.
        </Strip>
      )}
      {isAtTheBench ? (
        <AuthorisationsOf person={person} />
      ) : (
        <Box>
          <p>
            {person.role === 'client'
              ? `The results, certificates and alerts of ${person.clientName ?? 'one utility'}, and nothing of others.`
              : ROLE_HINTS[person.role]}
          </p>
        </Box>
      )}
    </MarginPage>
  )
}
