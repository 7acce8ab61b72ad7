import { useQuery } from '@tanstack/react-query'
import { determinationName, showUnit } from '@weirlight/shared/contracts'
import { Link } from 'react-router-dom'
import { paths, useFilters, useLaboratoryTime } from '../../../lib'
import {
  Box,
  DataTable,
  FilterBar,
  FilterSelect,
  Loaded,
  Provenance,
  StatusTag,
  type Column,
} from '../../../ui'
import { programmesQuery, type Limit, type Programme } from '../api/programme-queries'
import { KIND_WORDS, NON_DETECT_WORDS, RULE_WORDS, standingMark, TIES_WORDS } from '../programme-words'

/** Programmes with their limits: what results are compared with, and how. */
export function ProgrammesList() {
  const [filters, change, clear] = useFilters({ programme: '', metal: '' })
  return (
    <Loaded query={useQuery(programmesQuery)}>
      {({ items }) => {
        const shown = items
          .filter((each) => filters.programme === '' || each.code === filters.programme)
          .toSorted((a, b) => b.clients.length - a.clients.length || a.name.localeCompare(b.name))
        return (
          <>
            <FilterBar onClear={clear}>
              <FilterSelect
                label="Programme"
                value={filters.programme}
                onChange={(programme) => change({ programme })}
                options={items.map((each) => ({ value: each.code, label: each.name }))}
              />
              <FilterSelect
                label="Metal"
                value={filters.metal}
                onChange={(metal) => change({ metal })}
                options={[
                  { value: 'Fe', label: 'Iron' },
                  { value: 'Cu', label: 'Copper' },
                  { value: 'Mn', label: 'Manganese' },
                  { value: 'Cr', label: 'Chromium' },
                ]}
              />
            </FilterBar>
            <div className="stack">
              {shown.map((programme) => (
                <ProgrammeBox key={programme.id} programme={programme} metal={filters.metal} />
              ))}
            </div>
          </>
        )
      }}
    </Loaded>
  )
}

function ProgrammeBox({ programme, metal }: { programme: Programme; metal: string }) {
  const { today } = useLaboratoryTime()
  const day = today()
  const limits = programme.limits.filter((limit) => metal === '' || limit.analyte === metal)
  return (
    <Box title={programme.name}>
      <p className="quiet">{programme.note}</p>
      <p className="programme-rules">
        <span className="quiet">Results in</span> {showUnit(programme.displayUnit)}.{' '}
        <span className="quiet">Rounding:</span> {TIES_WORDS[programme.ties]}.{' '}
        <span className="quiet">Below detection:</span>{' '}
        {NON_DETECT_WORDS[programme.nonDetect] ?? programme.nonDetect}.{' '}
        <span className="quiet">Clients:</span> <Clients clients={programme.clients} />.
      </p>
      <DataTable
        label={`Limits of ${programme.name}`}
        rows={limits}
        rowKey={(row) => row.id}
        columns={columnsOn(day)}
        empty={{ title: 'No limits', text: 'Results of its clients are reported without a verdict.' }}
      />
    </Box>
  )
}

function Clients({ clients }: { clients: Programme['clients'] }) {
  if (clients.length === 0) return <span className="quiet">none</span>
  return clients.map((client, index) => (
    <span key={client.id}>
      {index > 0 && ', '}
      <Link to={paths.client(client.id)}>{client.name}</Link>
    </span>
  ))
}

const kindWords = (row: Limit) => KIND_WORDS[row.kind] ?? row.kind

/** `Action level` needs no `action level` beside it. */
const isSaidBy = (name: string, kind: string) => name.toLowerCase().includes(kind.toLowerCase())

const columnsOn = (day: string): Column<Limit>[] => [
  { key: 'what', title: 'Determination', text: (row) => determinationName(row.analyte, row.form) },
  {
    key: 'name',
    title: 'Limit',
    cell: (row) => (
      <>
        {row.name}
        {!isSaidBy(row.name, kindWords(row)) && <span className="quiet"> · {kindWords(row)}</span>}
      </>
    ),
  },
  {
    key: 'value',
    title: 'Value',
    kind: 'number',
    text: (row) => row.value,
    wrap: (_, aligned) => <span className="strong">{aligned}</span>,
  },
  { key: 'unit', title: 'Unit', onPhone: 'beside', text: (row) => showUnit(row.unit) },
  {
    key: 'rule',
    title: 'How it is compared',
    isSecondary: true,
    text: (row) => RULE_WORDS[row.decisionRule](row.digits),
  },
  {
    key: 'dates',
    title: 'Dates',
    cell: (row) => (
      <>
        <StatusTag mark={standingMark(row, day)} />
        <br />
        <span className="note nowrap">
          {row.validFrom}
          {row.validUntil ? ` to ${row.validUntil}` : ' on'}
        </span>
      </>
    ),
  },
  { key: 'source', title: 'Source and how it is known', cell: (row) => <Provenance of={row} /> },
]
