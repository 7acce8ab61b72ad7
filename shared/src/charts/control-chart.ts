import type { EChartsOption } from 'echarts'
import {
  axisLook,
  chartFrame,
  emptyChart,
  fixed,
  limitLines,
  roundAxis,
  type ChartColours,
  type LimitLine,
} from './chart-frame.js'

export interface ControlChartInput {
  /** in the order measured */
  points: readonly {
    /** under the point: a date or a batch number */
    label: string
    value: number
    /** names of the run rules that this point completes; empty when quiet */
    signals: readonly string[]
  }[]
  center: number | null
  upperAction: number | null
  lowerAction: number | null
  upperWarning: number | null
  lowerWarning: number | null
  /** 'recovery, %' */
  unit: string
  colours: ChartColours
}

/** Quality-control values in order, with centre, warning and action lines; a signal is a filled diamond. */
export function controlChart(input: ControlChartInput): EChartsOption {
  const { points, colours } = input
  if (points.length === 0) return emptyChart('No control values yet.', colours)
  const shown = controlNumbers(input)
  const line = (value: number | null, text: string, colour: string, dashed: boolean): LimitLine[] =>
    value === null ? [] : [{ value, text: `${text} ${shown(value)}`, colour, dashed }]
  const lines = [
    ...line(input.upperAction, 'action', colours.above, false),
    ...line(input.upperWarning, 'warning', colours.caution, true),
    ...line(input.center, 'centre', colours.quiet, false),
    ...line(input.lowerWarning, 'warning', colours.caution, true),
    ...line(input.lowerAction, 'action', colours.above, false),
  ]
  const look = axisLook(colours)
  const axis = roundAxis([...points.map((point) => point.value), ...lines.map((one) => one.value)])
  return {
    ...chartFrame(colours),
    grid: { left: 8, right: 104, top: 32, bottom: 8, containLabel: true },
    xAxis: {
      type: 'category',
      data: points.map((point) => point.label),
      ...look,
      // the batch says enough below the point; its position stands in the table
      axisLabel: {
        ...look.axisLabel,
        margin: 14,
        formatter: (label: string) => label.split(',')[0] ?? label,
      },
      splitLine: { show: false },
      axisLine: { show: true, onZero: false, lineStyle: { color: colours.rule } },
    },
    yAxis: {
      type: 'value',
      name: input.unit,
      nameLocation: 'end',
      ...axis,
      ...axisLook(colours, axis.interval),
      splitLine: { show: false },
      nameTextStyle: { ...look.nameTextStyle, align: 'left' },
    },
    series: [
      {
        type: 'line',
        name: 'control values',
        // a narrow drawing would leave points out, signals among them
        showAllSymbol: true,
        lineStyle: { color: colours.weir, width: 1.25 },
        data: points.map((point) => {
          const isSignal = point.signals.length > 0
          return {
            value: point.value,
            symbol: isSignal ? 'diamond' : 'circle',
            symbolSize: isSignal ? 13 : 7,
            itemStyle: {
              color: isSignal ? colours.above : colours.sheet,
              borderColor: isSignal ? colours.above : colours.weir,
              borderWidth: 1.5,
            },
            tooltip: {
              formatter: `${point.label}: ${shown(point.value)}${isSignal ? `, signal ${point.signals.join(', ')}` : ''}`,
            },
          }
        }),
        markLine: limitLines(lines, { position: 'end', ground: colours.sheet }),
      },
    ],
  }
}

type Scale = Pick<ControlChartInput, 'center' | 'upperAction'> & { points: readonly { value: number }[] }

/**
 * How the numbers of one chart are written: all to the place of the second digit of their standard deviation, so that
 * limits and values stand to the same decimals; to four digits of the largest while there are no limits.
 */
export function controlNumbers({ center, upperAction, points }: Scale): (value: number) => string {
  const deviation = center === null || upperAction === null ? 0 : (upperAction - center) / 3
  const largest = Math.max(0, ...points.map((point) => Math.abs(point.value)))
  const decimals =
    deviation > 0
      ? 1 - Math.floor(Math.log10(deviation))
      : largest > 0
        ? 3 - Math.floor(Math.log10(largest))
        : 0
  const places = Math.min(12, Math.max(0, decimals))
  return (value) => fixed(value, places)
}
