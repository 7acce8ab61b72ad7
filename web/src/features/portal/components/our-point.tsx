import { useQuery } from '@tanstack/react-query'
import { paths, useFilters } from '../../../lib'
import { Box, Empty, Loaded, MarginPage, NotFoundPage } from '../../../ui'
import { determinationOf } from '../../results'
import { latestAtPointQuery, utilityQuery } from '../api/portal-queries'
import { latestOfEach } from '../latest'
import { OwnResults } from './own-results'
import { OwnTrend } from './own-trend'

const LIST = { to: paths.portalPoints, label: 'Our points' }

/** One of our points: the trend of every determination made there, and its results. */
export function OurPoint({ id }: { id: string }) {
  const [chosen] = useFilters({ analyte: '', form: '' })
  const results = useQuery(latestAtPointQuery(id))
  return (
    <Loaded query={useQuery(utilityQuery)} skeleton="page" what="point" back={LIST}>
      {(utility) => {
        const point = utility.points.find((each) => each.id === id)
        if (!point) return <NotFoundPage what="point of ours" back={LIST} />
        return (
          <MarginPage title={point.name} subtitle={point.code} back={LIST}>
            <Loaded query={results}>
              {({ items, next }) => {
                const latest = latestOfEach(items).toSorted(
                  (a, b) =>
                    Number(isChosen(b, chosen)) - Number(isChosen(a, chosen)) ||
                    determinationOf(a).localeCompare(determinationOf(b)),
                )
                if (items.length === 0) {
                  return (
                    <Box>
                      <Empty title="No result is released for this point yet" />
                    </Box>
                  )
                }
                return (
                  <div className="stack">
                    {latest.map((row) => (
                      <OwnTrend key={row.id} pointId={id} analyte={row.analyte} form={row.form} />
                    ))}
                    <Box title="Results, newest first">
                      <OwnResults rows={items} isPointNamed={false} />
                      {next !== null && (
                        <p className="note">The newest {items.length} are shown; Results has all of them.</p>
                      )}
                    </Box>
                  </div>
                )
              }}
            </Loaded>
          </MarginPage>
        )
      }}
    </Loaded>
  )
}

const isChosen = (row: { analyte: string; form: string }, chosen: { analyte: string; form: string }) =>
  row.analyte === chosen.analyte && (chosen.form === '' || row.form === chosen.form)
