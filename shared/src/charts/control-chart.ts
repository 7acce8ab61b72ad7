import type { EChartsOption } from 'echarts'
import {
  axisLook,
  chartFrame,
  emptyChart,
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
  const line = (value: number | null, text: string, colour: string, dashed: boolean): LimitLine[] =>
    value === null ? [] : [{ value, text: `${text} ${short(value)}`, colour, dashed }]
  const lines = [
    ...line(input.upperAction, 'action', colours.above, false),
    ...line(input.upperWarning, 'warning', colours.caution, true),
    ...line(input.center, 'centre', colours.quiet, false),
    ...line(input.lowerWarning, 'warning', colours.caution, true),
    ...line(input.lowerAction, 'action', colours.above, false),
  ]
  const look = axisLook(colours)
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
      ...roundAxis([...points.map((point) => point.value), ...lines.map((one) => one.value)]),
      ...look,
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
              formatter: `${point.label}: ${short(point.value)}${isSignal ? `, signal ${point.signals.join(', ')}` : ''}`,
            },
          }
        }),
        markLine: limitLines(lines, { position: 'end', ground: colours.sheet }),
      },
    ],
  }
}

/** Four digits for a label; the number itself stands in the table beside the chart. */
const short = (value: number) => String(Number(value.toPrecision(4)))
