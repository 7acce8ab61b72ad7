import { useInfiniteQuery, useQuery } from '@tanstack/react-query'
import { exportHistory } from '@weirlight/shared/contracts'
import { asProblem, hrefFor, useFilters } from '../../../lib'
import {
  Bar,
  Empty,
  Failed,
  FilterBar,
  FilterDay,
  FilterSelect,
  FilterText,
  SkeletonLines,
} from '../../../ui'
import { filtersQuery, historyPages, NO_FILTERS, type HistoryFilters } from '../api/history-queries'
import { useNames } from '../hooks/use-names'
import { actionWord } from '../words/action-words'
import { thingWord } from '../words/thing-words'
import { HistoryEntry } from './history-entry'
import './history.css'

/** Every change to everything, newest first, narrowed by what stands in the address. */
export function HistoryList() {
  const [filters, change, clear] = useFilters({ ...NO_FILTERS })
  return (
    <>
      <Filters filters={filters} change={change} clear={clear} />
      <Entries filters={filters} />
    </>
  )
}

const byLabel = (a: { label: string }, b: { label: string }) => a.label.localeCompare(b.label)

interface FiltersProps {
  filters: HistoryFilters
  change: (part: Partial<HistoryFilters>) => void
  clear: () => void
}

function Filters({ filters, change, clear }: FiltersProps) {
  const choices = useQuery(filtersQuery)
  const { people = [], things = [], actions = [] } = choices.data ?? {}
  return (
    <FilterBar onClear={clear}>
      <FilterText
        label="Number"
        value={filters.number}
        onChange={(number) => change({ number })}
        placeholder="S-26-04117"
      />
      <FilterSelect
        label="Person"
        value={filters.actorId}
        onChange={(actorId) => change({ actorId })}
        options={people.map(({ id, name }) => ({ value: id, label: name }))}
        allLabel="Anybody"
      />
      <FilterSelect
        label="Thing"
        value={filters.thing}
        onChange={(thing) => change({ thing, thingId: '' })}
        options={things.map((value) => ({ value, label: thingWord(value) })).toSorted(byLabel)}
        allLabel="Anything"
      />
      <FilterSelect
        label="What was done"
        value={filters.action}
        onChange={(action) => change({ action })}
        options={actions.map((value) => ({ value, label: actionWord(value) })).toSorted(byLabel)}
        allLabel="Anything"
      />
      <FilterDay label="From day" value={filters.from} onChange={(from) => change({ from })} />
      <FilterDay label="To day" value={filters.to} onChange={(to) => change({ to })} />
      {filters.thingId !== '' && (
        <button type="button" className="button" onClick={() => change({ thingId: '' })}>
          Only {thingWord(filters.thing).toLowerCase()} no. {filters.thingId} ✕
          <span className="visually-hidden"> show all</span>
        </button>
      )}
    </FilterBar>
  )
}

function Entries({ filters }: { filters: HistoryFilters }) {
  const query = useInfiniteQuery(historyPages(filters))
  const names = useNames()
  const rows = query.data?.pages.flatMap((page) => page.items)
  if (!rows && query.isError)
    return <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
  return (
    <>
      <Bar
        lead="Open a line to see old and new side by side. Nothing here was ever changed or removed."
        actions={
          <a className="button" href={hrefFor(exportHistory, { query: { ...filters } })} download>
            Take away as CSV
          </a>
        }
      />
      <div className="table-wrap" tabIndex={0} role="region" aria-label="History">
        <table className="table history" aria-busy={!rows}>
          <caption className="visually-hidden">History, newest first</caption>
          <thead>
            <tr>
              <th scope="col">When</th>
              <th scope="col">Who</th>
              <th scope="col">What was done</th>
              <th scope="col">To what</th>
              <th scope="col">Change</th>
              <th scope="col">Why</th>
            </tr>
          </thead>
          <tbody>
            {rows?.map((row, index) => (
              <HistoryEntry key={row.id} row={row} previous={rows[index - 1]} names={names} />
            ))}
          </tbody>
        </table>
        {!rows && (
          <div className="empty">
            <SkeletonLines lines={6} />
          </div>
        )}
        {rows?.length === 0 && <Empty title="No entry fits">Clear a filter, or look at other days.</Empty>}
      </div>
      {rows && rows.length > 0 && (
        <div className="table-foot note">
          <span aria-live="polite">
            {query.hasNextPage ? `The newest ${rows.length} are shown.` : `All ${rows.length} are shown.`}
          </span>
          {query.hasNextPage && (
            <button
              type="button"
              className="button"
              disabled={query.isFetchingNextPage}
              onClick={() => void query.fetchNextPage()}
            >
              {query.isFetchingNextPage ? 'Loading older ones…' : 'Show older ones'}
            </button>
          )}
        </div>
      )}
    </>
  )
}
