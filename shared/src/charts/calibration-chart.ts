import type { EChartsOption } from 'echarts'
import { axisLook, chartFrame, emptyChart, roundAxis, type ChartColours } from './chart-frame.js'

export interface CalibrationChartInput {
  points: readonly {
    /** mg/L */
    concentration: number
    absorbance: number
    /** left out of the fit: drawn as a cross */
    leftOut?: boolean | undefined
    /** second source: drawn as a diamond */
    isSecondSource?: boolean | undefined
    /** fill of the point, as solutionColour gives it */
    tint?: string | undefined
  }[]
  /** `curveBand(fit).points`; empty while there is no fit */
  curve: readonly { concentration: number; fitted: number; low: number; high: number }[]
  /** 'iron' */
  analyteName: string
  unit: string
  wavelengthNm: number
  colours: ChartColours
}

/** Absorbance against concentration: readings, fitted curve, confidence band. */
export function calibrationChart(input: CalibrationChartInput): EChartsOption {
  const { points, curve, colours } = input
  if (points.length === 0) return emptyChart('The curve appears with the first readings.', colours)
  const x = roundAxis([
    0,
    ...points.map((point) => point.concentration),
    ...curve.map((point) => point.concentration),
  ])
  const readings = [...points.map((point) => point.absorbance), ...curve.map((point) => point.fitted)]
  const lowest = Math.min(0, ...readings)
  // a blank a little below zero needs a small step, not a large one of empty paper
  const y = roundAxis([0, ...readings], lowest < 0 ? 9 : 5)
  const look = axisLook(colours)
  const band = {
    type: 'line' as const,
    symbol: 'none',
    silent: true,
    stack: 'band',
    stackStrategy: 'all' as const,
  }
  return {
    ...chartFrame(colours),
    grid: { left: 8, right: 24, top: 32, bottom: 28, containLabel: true },
    xAxis: {
      type: 'value',
      name: `${input.analyteName}, ${input.unit}`,
      nameLocation: 'middle',
      nameGap: 28,
      ...x,
      ...look,
    },
    yAxis: {
      type: 'value',
      name: `absorbance, ${input.wavelengthNm} nm`,
      nameLocation: 'end',
      ...y,
      ...look,
      axisLabel: { ...look.axisLabel, showMinLabel: lowest === 0 || lowest < -y.interval / 2 },
      nameTextStyle: { ...look.nameTextStyle, align: 'left' },
    },
    series: [
      {
        ...band,
        name: 'band, lower edge',
        lineStyle: { opacity: 0 },
        data: curve.map((point) => [point.concentration, point.low]),
      },
      {
        ...band,
        name: 'confidence band',
        lineStyle: { opacity: 0 },
        areaStyle: { color: colours.weir, opacity: 0.14 },
        data: curve.map((point) => [point.concentration, point.high - point.low]),
      },
      {
        type: 'line',
        name: 'fitted curve',
        symbol: 'none',
        silent: true,
        lineStyle: { color: colours.weir, width: 1.75 },
        data: curve.map((point) => [point.concentration, point.fitted]),
      },
      {
        type: 'scatter',
        name: 'readings',
        z: 5,
        data: points.map((point) => ({
          value: [point.concentration, point.absorbance],
          symbol: point.leftOut ? CROSS : point.isSecondSource ? 'diamond' : 'circle',
          symbolSize: point.isSecondSource ? 12 : 9,
          itemStyle: {
            color: point.leftOut ? colours.caution : (point.tint ?? colours.sheet),
            borderColor: point.leftOut
              ? colours.caution
              : point.isSecondSource
                ? colours.copper
                : colours.ink,
            borderWidth: 1.25,
          },
          tooltip: {
            formatter: `${point.concentration} ${input.unit}: ${point.absorbance}${
              point.leftOut ? ', left out' : point.isSecondSource ? ', second source' : ''
            }`,
          },
        })),
      },
    ],
  }
}

/** A cross is a shape of its own: left out is seen without colour. */
const CROSS = 'path://M0,1 L1,0 L5,4 L9,0 L10,1 L6,5 L10,9 L9,10 L5,6 L1,10 L0,9 L4,5 Z'

export interface ResidualsChartInput {
  points: readonly { concentration: number; residual: number }[]
  /** on the axis: the end of the calibration chart's, so that both line up */
  upTo?: number | undefined
  unit: string
  colours: ChartColours
}

/** Residuals in thousandths of absorbance against concentration. */
export function residualsChart(input: ResidualsChartInput): EChartsOption {
  const { points, colours } = input
  if (points.length === 0) return emptyChart('Residuals appear with the curve.', colours)
  const milli = points.map((point) => ({ x: point.concentration, y: point.residual * 1000 }))
  const farthest = Math.max(...milli.map((point) => Math.abs(point.y)))
  // points on the line leave only the dust of binary arithmetic: drawn as what it is, nothing
  const far = farthest < 1e-6 ? 0.1 : farthest
  const y = roundAxis([-far, 0, far], 4)
  const look = axisLook(colours)
  return {
    ...chartFrame(colours),
    grid: { left: 8, right: 24, top: 32, bottom: 28, containLabel: true },
    xAxis: {
      type: 'value',
      name: input.unit,
      nameLocation: 'middle',
      nameGap: 28,
      ...roundAxis([0, ...milli.map((point) => point.x), ...(input.upTo === undefined ? [] : [input.upTo])]),
      ...look,
      splitLine: { show: false },
    },
    yAxis: {
      type: 'value',
      name: 'residual, mA',
      nameLocation: 'end',
      ...y,
      ...look,
      nameTextStyle: { ...look.nameTextStyle, align: 'left' },
    },
    series: [
      {
        type: 'scatter',
        name: 'residuals',
        symbol: 'circle',
        symbolSize: 8,
        itemStyle: { color: colours.sheet, borderColor: colours.weir, borderWidth: 1.5 },
        data: milli.map((point) => ({
          value: [point.x, point.y],
          tooltip: { formatter: `${point.x} ${input.unit}: ${point.y.toFixed(1)} mA` },
        })),
        markLine: {
          silent: true,
          symbol: 'none',
          label: { show: false },
          lineStyle: { color: colours.quiet, width: 1, type: 'solid' },
          data: [{ yAxis: 0 }],
        },
      },
    ],
  }
}
