import { controlNumbers } from '@weirlight/shared/charts'
import type { ControlChartView } from './api/chart-queries'

export interface SignalLine {
  key: string
  at: string
  batchId: string | null
  label: string
  value: number
  /** `Beyond an action limit; two of three beyond the same warning limit` */
  words: string
}

const sentence = (text: string) => text.charAt(0).toUpperCase() + text.slice(1)

/** The points that completed a pattern, newest first, each with its patterns in words. */
export function signalLines(chart: ControlChartView): SignalLine[] {
  return chart.points
    .filter((point) => point.signals.length > 0)
    .map((point) => ({
      key: `${point.at} ${point.label}`,
      at: point.at,
      batchId: point.batchId,
      label: point.label,
      value: point.value,
      words: sentence(point.signals.join('; ')),
    }))
    .toSorted((a, b) => Date.parse(b.at) - Date.parse(a.at))
}

/** `42 values, centre 99.8 %, action limits 93.1 to 106.5 %.` */
export function chartWords(chart: ControlChartView): string {
  const { points, center, lowerAction, upperAction, unit } = chart
  const shown = controlNumbers(chart)
  if (points.length === 0) return 'No value yet.'
  const many = points.length === 1 ? 'One value' : `${points.length} values`
  if (center === null || lowerAction === null || upperAction === null) {
    return `${many}; too few for limits.`
  }
  const signals = points.filter((point) => point.signals.length > 0).length
  const found = signals === 0 ? 'No signal.' : signals === 1 ? 'One signal.' : `${signals} signals.`
  return `${many}, centre ${shown(center)} ${unit}, action limits ${shown(lowerAction)} to ${shown(upperAction)} ${unit}. ${found}`
}
