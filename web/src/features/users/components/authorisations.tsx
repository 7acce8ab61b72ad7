import { useQuery } from '@tanstack/react-query'
import { asProblem, useFilters, useLaboratoryTime } from '../../../lib'
import { Box, DataTable, Failed, FilterBar, FilterSelect, StatusTag, type Column } from '../../../ui'
import { methodChoicesQuery, usersQuery, type Authorisation, type UserView } from '../api/user-queries'
import { ACTIVITIES, ACTIVITY_WORDS, authorisationMark } from '../user-words'

interface Held extends Authorisation {
  person: UserView
}

/** Disabled people keep their record, and may do nothing. */
const heldBy = (people: readonly UserView[]): Held[] =>
  people
    .filter((person) => person.status !== 'disabled')
    .flatMap((person) => person.authorisations.map((each) => ({ ...each, person })))

/** By method: who may measure, sign and review today. */
export function AuthorisationsByMethod() {
  const people = useQuery(usersQuery)
  const methods = useQuery(methodChoicesQuery)
  const held = heldBy(people.data?.items ?? []).filter((each) => each.inForce)
  const error = people.error ?? methods.error
  if (error && !(people.data && methods.data)) {
    const retry = () => void Promise.all([people.refetch(), methods.refetch()])
    return <Failed problem={asProblem(error)} retry={retry} />
  }
  return (
    <Box title="By method: who may do what today">
      <DataTable
        label="Authorised people by method"
        rows={people.data && methods.data?.items.filter((method) => method.active)}
        columns={[
          { key: 'method', title: 'Method', text: (method) => method.title },
          ...ACTIVITIES.map((activity) => ({
            key: activity,
            title: ACTIVITY_WORDS[activity],
            cell: (method: { id: string }) => (
              <Names
                held={held.filter((each) => each.methodId === method.id && each.activity === activity)}
              />
            ),
          })),
        ]}
        rowKey={(method) => method.id}
        empty={{ title: 'No method is in use' }}
      />
    </Box>
  )
}

const NOBODY = { word: 'nobody', shape: 'triangle', tone: 'above' } as const

function Names({ held }: { held: readonly Held[] }) {
  if (held.length === 0) return <StatusTag mark={NOBODY} />
  return (
    <ul className="plain-list">
      {held.map((each) => (
        <li key={each.id}>
          {each.person.name} <span className="note">to {each.validUntil}</span>
        </li>
      ))}
    </ul>
  )
}

/** Every authorisation there is, with what shows it. */
export function AllAuthorisations() {
  const [filters, change, clear] = useFilters({ person: '', activity: '', standing: '' })
  const people = useQuery(usersQuery)
  const { today } = useLaboratoryTime()
  const columns: Column<Held>[] = [
    { key: 'person', title: 'Person', text: (row) => row.person.name },
    { key: 'activity', title: 'May', text: (row) => ACTIVITY_WORDS[row.activity] },
    { key: 'method', title: 'By', text: (row) => row.methodTitle },
    {
      key: 'standing',
      title: 'Standing',
      cell: (row) => <StatusTag mark={authorisationMark(row, today())} />,
    },
    { key: 'from', title: 'From', isNarrow: true, text: (row) => row.validFrom },
    { key: 'until', title: 'Until', isNarrow: true, text: (row) => row.validUntil },
    {
      key: 'evidence',
      title: 'What shows it',
      cell: (row) => <div className="wide-cell">{row.evidence}</div>,
    },
  ]
  const rows = people.data && heldBy(people.data.items)
  return (
    <Box title="Every authorisation">
      <FilterBar onClear={clear}>
        <FilterSelect
          label="Person"
          value={filters.person}
          onChange={(person) => change({ person })}
          options={(people.data?.items ?? [])
            .filter((person) => person.authorisations.length > 0)
            .map((person) => ({ value: person.id, label: person.name }))}
        />
        <FilterSelect
          label="May"
          value={filters.activity}
          onChange={(activity) => change({ activity })}
          options={ACTIVITIES.map((value) => ({ value, label: ACTIVITY_WORDS[value] }))}
        />
        <FilterSelect
          label="Standing"
          value={filters.standing}
          onChange={(standing) => change({ standing })}
          options={[
            { value: 'yes', label: 'In force' },
            { value: 'no', label: 'Not in force' },
          ]}
        />
      </FilterBar>
      <DataTable
        label="Authorisations"
        rows={rows?.filter(
          (row) =>
            (filters.person === '' || row.person.id === filters.person) &&
            (filters.activity === '' || row.activity === filters.activity) &&
            (filters.standing === '' || row.inForce === (filters.standing === 'yes')),
        )}
        columns={columns}
        rowKey={(row) => row.id}
        empty={{ title: 'No authorisation fits', text: 'An administrator records them on Settings, People.' }}
      />
    </Box>
  )
}

/** Of one person. */
export function AuthorisationsOf({ person }: { person: UserView }) {
  const { today } = useLaboratoryTime()
  return (
    <DataTable
      label={`Authorisations of ${person.name}`}
      rows={person.authorisations}
      columns={[
        { key: 'activity', title: 'May', text: (row) => ACTIVITY_WORDS[row.activity] },
        { key: 'method', title: 'By', text: (row) => row.methodTitle },
        {
          key: 'standing',
          title: 'Standing',
          cell: (row) => <StatusTag mark={authorisationMark(row, today())} />,
        },
        { key: 'from', title: 'From', isNarrow: true, text: (row) => row.validFrom },
        { key: 'until', title: 'Until', isNarrow: true, text: (row) => row.validUntil },
        {
          key: 'evidence',
          title: 'What shows it',
          cell: (row) => <div className="wide-cell">{row.evidence}</div>,
        },
      ]}
      rowKey={(row) => row.id}
      empty={{ title: 'None yet', text: 'Without one this person can measure, sign and review nothing.' }}
    />
  )
}
