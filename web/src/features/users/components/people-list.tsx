import { useQuery } from '@tanstack/react-query'
import { ROLE_NAMES, ROLES } from '@weirlight/shared/permissions'
import { STATE_MARKS } from '@weirlight/shared/states'
import { asProblem, paths, useFilters } from '../../../lib'
import {
  DataTable,
  Failed,
  FilterBar,
  FilterSelect,
  FilterText,
  MailAddress,
  Since,
  StatusTag,
} from '../../../ui'
import { usersQuery, type UserView } from '../api/user-queries'

const STATES = (['active', 'invited', 'disabled'] as const).map((value) => ({
  value,
  label: STATE_MARKS.user[value].word,
}))

export function PeopleList() {
  const [filters, change, clear] = useFilters({ role: '', status: '', find: '' })
  const query = useQuery(usersQuery)
  if (query.isError && !query.data)
    return <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
  const fits = (row: UserView) =>
    (filters.role === '' || row.role === filters.role) &&
    (filters.status === '' || row.status === filters.status) &&
    `${row.name} ${row.email}`.toLowerCase().includes(filters.find.trim().toLowerCase())
  return (
    <>
      <FilterBar onClear={clear}>
        <FilterSelect
          label="Role"
          value={filters.role}
          onChange={(role) => change({ role })}
          options={ROLES.map((value) => ({ value, label: ROLE_NAMES[value] }))}
        />
        <FilterSelect
          label="State"
          value={filters.status}
          onChange={(status) => change({ status })}
          options={STATES}
        />
        <FilterText
          label="Name or e-mail"
          value={filters.find}
          onChange={(find) => change({ find })}
          width={200}
        />
      </FilterBar>
      <DataTable
        label="People"
        rows={query.data?.items.filter(fits)}
        columns={[
          { key: 'name', title: 'Name', text: (row) => row.name },
          { key: 'role', title: 'Role', text: (row) => ROLE_NAMES[row.role] },
          {
            key: 'state',
            title: 'State',
            onPhone: 'corner',
            cell: (row) => <StatusTag mark={STATE_MARKS.user[row.status]} />,
          },
          { key: 'email', title: 'E-mail', cell: (row) => <MailAddress of={row.email} /> },
          { key: 'client', title: 'Utility', text: (row) => row.clientName ?? '' },
          {
            key: 'seen',
            title: 'Last signed in',
            isSecondary: true,
            cell: (row) =>
              row.lastSignedInAt ? <Since at={row.lastSignedInAt} /> : <span className="quiet">never</span>,
          },
          {
            key: 'factor',
            title: 'Second factor',
            isSecondary: true,
            text: (row) => (row.secondFactorSince ? 'yes' : 'no'),
          },
          {
            key: 'held',
            title: 'Authorisations',
            unit: 'in force',
            kind: 'number',
            isSecondary: true,
            text: (row) => String(row.authorisations.filter((each) => each.inForce).length),
          },
        ]}
        rowKey={(row) => row.id}
        rowTo={(row) => paths.settingsPerson(row.id)}
        empty={{ title: 'Nobody fits', text: 'Clear the filters to see everyone.' }}
      />
    </>
  )
}
