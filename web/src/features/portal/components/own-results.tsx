import type { UseInfiniteQueryResult, InfiniteData } from '@tanstack/react-query'
import { Link } from 'react-router-dom'
import { asProblem, paths, useLaboratoryTime } from '../../../lib'
import { Empty, Failed, MarkShape, SkeletonLines } from '../../../ui'
import { determinationOf, findingOf, flagWords, withUnit, type ResultRow } from '../../results'
import './portal.css'

interface OwnResultsProps {
  rows: readonly ResultRow[]
  /** left out where the whole list is of one point */
  isPointNamed?: boolean
}

/** Results as lines for a thumb: what and where on the left, the number with its shape on the right. */
export function OwnResults({ rows, isPointNamed = true }: OwnResultsProps) {
  const { at } = useLaboratoryTime()
  return (
    <ul className="own-lines">
      {rows.map((row) => {
        const finding = findingOf(row)
        const flags = flagWords(row.flags)
        const uncertainty =
          row.uncertaintyText === null ? '' : ` ± ${row.uncertaintyText.replace(/^±\s*/, '')}`
        return (
          <li key={row.id}>
            <Link
              className="own-line"
              to={`${paths.portalPoint(row.pointId)}?analyte=${row.analyte}&form=${row.form}`}
            >
              <span className="own-what">
                <span>
                  {determinationOf(row)}
                  {isPointNamed && `, ${row.pointName}`}
                </span>
                <span className="quiet own-small">{[at(row.collectedAt), ...flags].join(' · ')}</span>
              </span>
              <span className={`own-number is-${finding.mark.tone}`}>
                <span>
                  <MarkShape shape={finding.mark.shape} /> {withUnit(row)}
                </span>
                <span className="own-small">
                  {finding.words}
                  {uncertainty !== '' && <span className="quiet">,{uncertainty}</span>}
                </span>
              </span>
            </Link>
          </li>
        )
      })}
    </ul>
  )
}

interface Page {
  items: ResultRow[]
  next: string | null
}

/** The same lines for a list that is read page by page. */
export function OwnResultPages({ query }: { query: UseInfiniteQueryResult<InfiniteData<Page>, Error> }) {
  const rows = query.data?.pages.flatMap((page) => page.items)
  if (!rows) {
    return query.isError ? (
      <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
    ) : (
      <SkeletonLines />
    )
  }
  if (rows.length === 0) {
    return <Empty title="No result fits">Clear the filters to see all of them.</Empty>
  }
  return (
    <>
      <OwnResults rows={rows} />
      {query.hasNextPage && (
        <button
          type="button"
          className="button own-more"
          disabled={query.isFetchingNextPage}
          onClick={() => void query.fetchNextPage()}
        >
          {query.isFetchingNextPage ? 'Loading more…' : 'Show more'}
        </button>
      )}
    </>
  )
}
