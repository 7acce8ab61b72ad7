import type { EChartsOption } from 'echarts'

/** Colours of the theme in force; a PDF hands in the light ones. */
export interface ChartColours {
  ink: string
  quiet: string
  rule: string
  hair: string
  paper: string
  sheet: string
  weir: string
  copper: string
  meets: string
  caution: string
  above: string
}

export const CHART_FONT = 'Roboto, Arial, sans-serif'
export const TEXT_SIZE = 12

/** What all charts share: no motion (a record is not a show), no HTML in tooltips (strict content policy). */
export function chartFrame(colours: ChartColours): EChartsOption {
  return {
    animation: false,
    backgroundColor: 'transparent',
    textStyle: { fontFamily: CHART_FONT, fontSize: TEXT_SIZE, color: colours.ink },
    tooltip: {
      trigger: 'item',
      renderMode: 'richText',
      backgroundColor: colours.sheet,
      borderColor: colours.rule,
      borderWidth: 1,
      padding: 8,
      textStyle: { fontFamily: CHART_FONT, fontSize: TEXT_SIZE, color: colours.ink },
    },
  }
}

/** `interval` of a round axis: its labels then carry the same decimals, 0.10 between 0.05 and 0.15. */
export function axisLook(colours: ChartColours, interval?: number) {
  return {
    nameTextStyle: { color: colours.quiet, fontSize: TEXT_SIZE },
    axisLabel: {
      color: colours.quiet,
      fontSize: TEXT_SIZE,
      hideOverlap: true,
      ...(interval === undefined ? {} : { formatter: axisNumber(interval) }),
    },
    axisLine: { show: false },
    axisTick: { show: false },
    splitLine: { show: true, lineStyle: { color: colours.hair } },
  }
}

/** Shown in place of a drawing without points. */
export function emptyChart(text: string, colours: ChartColours): EChartsOption {
  return {
    ...chartFrame(colours),
    graphic: [
      {
        type: 'text',
        left: 'center',
        top: 'middle',
        style: { text, fill: colours.quiet, fontFamily: CHART_FONT, fontSize: 14 },
      },
    ],
  }
}

/** Ends and step of an axis on round numbers (1, 2 or 5 times a power of ten) around all values. */
export function roundAxis(values: readonly number[], ticks = 5) {
  let low = Math.min(...values)
  let high = Math.max(...values)
  if (low === high) {
    // one value alone stands in the middle, zero alone at the foot
    low -= Math.abs(high) / 2
    high += Math.abs(high) / 2 || 1
  }
  const span = high - low
  const raw = span / ticks
  const power = 10 ** Math.floor(Math.log10(raw))
  const step = ([1, 2, 5, 10].find((factor) => factor * power >= raw * 0.999) ?? 10) * power
  // twelve digits take away the dust of binary arithmetic from the labels
  const clean = (value: number) => Number(value.toPrecision(12))
  const interval = clean(step)
  return {
    min: clean(Math.floor(low / step + 1e-9) * step),
    max: clean(Math.ceil(high / step - 1e-9) * step),
    interval,
  }
}

/** A step of 1, 2 or 5 times a power of ten has one digit: its place is the last decimal of every label. */
function axisNumber(interval: number): (value: number) => string {
  const decimals = Math.max(0, -Math.floor(Math.log10(interval) + 1e-9))
  return (value) => fixed(value, Math.min(12, decimals))
}

/** So many decimals, trailing zeros kept, with a true minus and no minus before zero. */
export function fixed(value: number, decimals: number): string {
  const text = value.toFixed(decimals)
  return Number(text) === 0 ? text.replace('-', '') : text.replace('-', '−')
}

export interface LimitLine {
  value: number
  text: string
  colour: string
  dashed?: boolean
}

/** Horizontal lines with their words at the end of the line, inside the drawing. */
export function limitLines(
  lines: readonly LimitLine[],
  look: { position: 'insideStartTop' | 'end'; ground: string },
) {
  return {
    silent: true,
    symbol: 'none',
    data: lines.map((line) => ({
      yAxis: line.value,
      lineStyle: {
        color: line.colour,
        width: 1.25,
        type: line.dashed ? ('dashed' as const) : ('solid' as const),
      },
      label: {
        show: true,
        position: look.position,
        formatter: line.text,
        color: line.colour,
        fontSize: TEXT_SIZE,
        backgroundColor: look.ground,
        padding: [1, 3],
      },
    })),
  }
}
