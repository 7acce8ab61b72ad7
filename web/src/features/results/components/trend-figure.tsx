import { showUnit } from '@weirlight/shared/contracts'
import { trendChart } from '@weirlight/shared/charts'
import { useMemo } from 'react'
import { useLaboratoryTime } from '../../../lib'
import { Chart, useChartColours } from '../../../ui/chart'
import type { Trend } from '../api/result-queries'
import { isAbove, trendWords } from '../result-words'

interface TrendFigureProps {
  trend: Trend
  height?: number
  onPick?: (resultId: string) => void
  /** what the shapes mean, below the drawing */
  isExplained?: boolean
}

/** Results of one point over time with the limit; what is drawn is said in words as well. */
export function TrendFigure({ trend, height = 260, onPick, isExplained = true }: TrendFigureProps) {
  const colours = useChartColours()
  const { at, day } = useLaboratoryTime()
  const inTime = useMemo(
    () => trend.points.toSorted((a, b) => Date.parse(a.at) - Date.parse(b.at)),
    [trend.points],
  )
  const option = useMemo(
    () =>
      trendChart({
        points: inTime.map((point) => ({ ...point, when: at(point.at) })),
        limit: trend.limit,
        unit: showUnit(trend.unit),
        colours,
      }),
    [inTime, trend.limit, trend.unit, colours, at],
  )
  const legend = [
    trend.points.some((point) => isAbove(point.verdict)) && 'Triangle up: above the limit.',
    trend.points.some((point) => point.nonDetect) &&
      'Triangle down: not detected, drawn at the limit behind its “<”.',
    onPick && trend.points.length > 0 && 'A point opens its story.',
  ].filter(Boolean)
  return (
    <Chart
      option={option}
      summary={trendWords({ ...trend, points: inTime }, day)}
      height={height}
      {...(isExplained && legend.length > 0 ? { caption: legend.join(' ') } : {})}
      {...(onPick
        ? {
            onPick: ({ dataIndex }: { dataIndex: number }) => {
              const point = inTime[dataIndex]
              if (point) onPick(point.resultId)
            },
          }
        : {})}
    />
  )
}
