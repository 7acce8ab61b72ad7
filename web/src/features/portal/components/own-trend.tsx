import { useQuery } from '@tanstack/react-query'
import { determinationName, type AnalyteCode } from '@weirlight/shared/contracts'
import { useLaboratoryTime } from '../../../lib'
import { Box, Loaded } from '../../../ui'
import { TrendFigure, trendWords, type FormCode } from '../../results'
import { ownTrendQuery } from '../api/portal-queries'

interface OwnTrendProps {
  pointId: string
  analyte: AnalyteCode
  form: FormCode
  pointName?: string | undefined
}

/** One determination at one of our points over time. */
export function OwnTrend({ pointId, analyte, form, pointName }: OwnTrendProps) {
  const { day } = useLaboratoryTime()
  const name = determinationName(analyte, form)
  return (
    <Box title={pointName ? `${name}, ${pointName}` : name}>
      <Loaded query={useQuery(ownTrendQuery({ pointId, analyte, form }))}>
        {(trend) =>
          trend.points.length === 0 ? (
            <p className="quiet">No result of it at this point yet.</p>
          ) : (
            <>
              <p className="note">{trendWords(trend, day)}</p>
              <TrendFigure trend={trend} height={200} />
            </>
          )
        }
      </Loaded>
    </Box>
  )
}
