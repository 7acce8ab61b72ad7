import type { EChartsOption } from 'echarts'
import { convertUnit } from '../assay/index.js'
import {
  axisLook,
  chartFrame,
  emptyChart,
  fixed,
  limitLines,
  roundAxis,
  type ChartColours,
} from './chart-frame.js'

export interface TrendChartInput {
  points: readonly {
    /** ISO 8601 */
    at: string
    /** in the unit shown; for a non-detect the limit behind its "<" */
    value: number
    /** as reported: '0.21', '<0.010' */
    text: string
    /** as the reader's clock says it: '2026-11-30 08:40' */
    when: string
    verdict: 'below' | 'above' | 'conditional-below' | 'conditional-above' | null
    nonDetect: boolean
  }[]
  /** `text`: as the programme writes it, '0.010' */
  limit: { name: string; value: number; text: string } | null
  unit: string
  colours: ChartColours
}

/** A limit in the unit of the drawing, written with the digits it has in its programme: 50 µg/L is 0.050 mg/L. */
export function drawnLimit(
  limit: { name: string; value: string; unit: 'mg/L' | 'ug/L' },
  unit: 'mg/L' | 'ug/L',
): { name: string; value: number; text: string } {
  const value = convertUnit({ value: Number(limit.value), from: limit.unit, to: unit })
  if (limit.unit === unit) return { name: limit.name, value, text: limit.value }
  const decimals = limit.value.split('.')[1]?.length ?? 0
  return { name: limit.name, value, text: fixed(value, Math.max(0, decimals + (unit === 'mg/L' ? 3 : -3))) }
}

type Point = TrendChartInput['points'][number]

/** Shape and colour together, so that neither alone carries the meaning. */
function mark(point: Point, colours: ChartColours) {
  if (point.verdict === 'above' || point.verdict === 'conditional-above') {
    return {
      symbol: 'triangle',
      symbolSize: 11,
      itemStyle: { color: colours.above, borderColor: colours.above },
    }
  }
  if (point.nonDetect) {
    const itemStyle = { color: colours.sheet, borderColor: colours.quiet, borderWidth: 1.5 }
    return { symbol: 'triangle', symbolRotate: 180, symbolSize: 9, itemStyle }
  }
  const itemStyle = { color: colours.sheet, borderColor: colours.weir, borderWidth: 1.5 }
  return { symbol: 'circle', symbolSize: 8, itemStyle }
}

const DAY = 86_400_000

/** A single day would be drawn by the hour: widen it to a fortnight. */
function timeSpan(times: readonly number[]) {
  const first = Math.min(...times)
  const last = Math.max(...times)
  return last - first >= 4 * DAY ? {} : { min: first - 7 * DAY, max: last + 7 * DAY }
}

/**
 * Results of one point over time, with the limit. Triangle up: above the limit. Triangle down: not detected, drawn at the
 * limit behind its "<". The axis starts at zero or at the lowest value below it.
 */
export function trendChart(input: TrendChartInput): EChartsOption {
  const { points, limit, colours, unit } = input
  if (points.length === 0) return emptyChart('No results in this time.', colours)
  const look = axisLook(colours)
  const axis = roundAxis([0, ...points.map((point) => point.value), ...(limit ? [limit.value] : [])])
  const inTime = points.toSorted((a, b) => Date.parse(a.at) - Date.parse(b.at))
  const times = inTime.map((point) => Date.parse(point.at))
  return {
    ...chartFrame(colours),
    useUTC: true,
    grid: { left: 8, right: 24, top: 32, bottom: 8, containLabel: true },
    xAxis: {
      type: 'time',
      ...timeSpan(times),
      ...look,
      splitLine: { show: false },
      axisLine: { show: true, lineStyle: { color: colours.rule } },
      axisLabel: {
        ...look.axisLabel,
        formatter: { year: '{yyyy}-{MM}', month: '{yyyy}-{MM}', day: '{MM}-{dd}', hour: '{HH}:{mm}' },
      },
    },
    yAxis: {
      type: 'value',
      name: unit,
      nameLocation: 'end',
      ...axis,
      ...axisLook(colours, axis.interval),
      nameTextStyle: { ...look.nameTextStyle, align: 'right' },
    },
    series: [
      {
        type: 'line',
        name: 'results',
        lineStyle: { color: colours.weir, width: 1.5 },
        data: inTime.map((point) => ({
          value: [point.at, point.value],
          ...mark(point, colours),
          tooltip: { formatter: `${point.when}: ${point.text} ${unit}` },
        })),
        ...(limit === null
          ? {}
          : {
              markLine: limitLines(
                [
                  {
                    value: limit.value,
                    text: `${limit.name} ${limit.text}`,
                    colour: colours.above,
                    dashed: true,
                  },
                ],
                { position: 'insideStartTop', ground: colours.sheet },
              ),
            }),
      },
    ],
  }
}
