import { determinationName, showUnit } from '@weirlight/shared/contracts'
import { STATE_MARKS, type StateMark } from '@weirlight/shared/states'
import type { FormCode, ResultRow, Trend } from './api/result-queries'

const FLAG_WORDS: Record<string, string> = {
  'not-detected': 'not detected',
  estimated: 'estimated',
  'above-range': 'above the curve',
  'below-range': 'below the curve',
  'absorbance-high': 'absorbance high',
  'quantification-above-limit': 'the method cannot see the limit',
  'holding-time-exceeded': 'holding time exceeded',
  'read-early': 'read early',
  'read-late': 'read late',
  'readings-apart': 'readings apart',
  'quality-control-failed': 'quality control failed',
}
export const flagWords = (flags: readonly string[]): string[] =>
  flags.map((flag) => FLAG_WORDS[flag] ?? flag.replaceAll('-', ' '))

/** A hyphen before a digit is a minus sign. */
export const shownNumber = (text: string): string => text.replace(/^-/, '−')
export const withUnit = (row: Pick<ResultRow, 'text' | 'unit'>): string =>
  `${shownNumber(row.text)} ${showUnit(row.unit)}`
export const determinationOf = (row: Pick<ResultRow, 'analyte' | 'form'>): string =>
  determinationName(row.analyte, row.form)
export const isAbove = (verdict: string | null): boolean =>
  verdict === 'above' || verdict === 'conditional-above'

export interface Finding {
  mark: StateMark
  words: string
}

type Judged = Pick<ResultRow, 'verdict' | 'limitValue' | 'limitUnit' | 'unit'>

/** What a result comes to beside its limit: `above 0.3`, `below 0.05, within uncertainty`, `no limit`. */
export function findingOf(row: Judged): Finding {
  if (row.verdict === null || row.limitValue === null) {
    return { mark: { word: 'no limit', shape: 'ring', tone: 'quiet' }, words: 'no limit' }
  }
  const mark = STATE_MARKS.verdict[row.verdict]
  const unit = row.limitUnit === null || row.limitUnit === row.unit ? '' : ` ${showUnit(row.limitUnit)}`
  const [side, ...rest] = mark.word.split(',')
  return { mark, words: [`${side} ${row.limitValue}${unit}`, ...rest].join(',') }
}

/** The form a laboratory measures most of each analyte; the person may choose another. */
export function usualForm(analyte: string): FormCode {
  return analyte === 'Cr' ? 'hexavalent' : 'total'
}

/** `12 results from 2025-12-01 to 2026-11-30, between 0.10 and 0.21 mg/L. Limit 0.05 mg/L, aesthetic level.` */
export function trendWords(trend: Trend, day: (instant: string) => string): string {
  const unit = showUnit(trend.unit)
  const [first] = trend.points
  const last = trend.points.at(-1)
  if (!first || !last) return 'No released results yet.'
  const byValue = trend.points.toSorted((a, b) => a.value - b.value)
  const low = byValue[0]?.text ?? first.text
  const high = byValue.at(-1)?.text ?? last.text
  const many =
    trend.points.length === 1
      ? `One result, ${day(first.at)}: ${first.text} ${unit}.`
      : `${trend.points.length} results from ${day(first.at)} to ${day(last.at)}, between ${low} and ${high} ${unit}.`
  const limit = trend.limit ? ` Limit ${trend.limit.text} ${unit}, ${trend.limit.name}.` : ''
  return `${many}${limit}`
}
