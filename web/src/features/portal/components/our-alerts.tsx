import { useInfiniteQuery } from '@tanstack/react-query'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Link } from 'react-router-dom'
import { asProblem, paths, useLaboratoryTime } from '../../../lib'
import { Box, Clock, Empty, Failed, SkeletonLines, StatusTag } from '../../../ui'
import { alertPages, isAnswered, overWhat, whatWasFound } from '../../alerts'
import './portal.css'

/** Every alert of ours, answered or not. */
export function OurAlerts() {
  const { at } = useLaboratoryTime()
  const query = useInfiniteQuery(alertPages({ state: '', clientId: '' }))
  const rows = query.data?.pages.flatMap((page) => page.items)
  if (!rows) {
    return query.isError ? (
      <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
    ) : (
      <SkeletonLines />
    )
  }
  if (rows.length === 0) {
    return (
      <Box>
        <Empty title="No alert was raised for us">No released result was above a limit so far.</Empty>
      </Box>
    )
  }
  return (
    <Box>
      <ul className="own-lines">
        {rows.map((row) => (
          <li key={row.id}>
            <Link className="own-line is-stacked" to={paths.portalAlert(row.id)}>
              <span className="own-what">
                <span>
                  {whatWasFound(row)}, {row.pointName}
                </span>
                <span className="quiet own-small">
                  {overWhat(row)} · {row.number} · {at(row.raisedAt)}
                </span>
              </span>
              <span className="own-latest">
                <StatusTag mark={STATE_MARKS.alert[row.state]} />
                {!isAnswered(row) && row.answerDueAt !== null && <Clock dueAt={row.answerDueAt} />}
              </span>
            </Link>
          </li>
        ))}
      </ul>
      {query.hasNextPage && (
        <button
          type="button"
          className="button own-more"
          disabled={query.isFetchingNextPage}
          onClick={() => void query.fetchNextPage()}
        >
          Show more
        </button>
      )}
    </Box>
  )
}
