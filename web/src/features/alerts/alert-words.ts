import { drawnLimit } from '@weirlight/shared/charts'
import { determinationName, showUnit } from '@weirlight/shared/contracts'
import { shownNumber, type Trend } from '../results'
import type { AlertRow, AlertView } from './api/alert-queries'

/** `Manganese, total 0.21 mg/L` */
export const whatWasFound = (alert: AlertRow): string =>
  `${determinationName(alert.analyte, alert.form)} ${shownNumber(alert.text)} ${showUnit(alert.unit)}`

/** `above 0.05 mg/L` */
export const overWhat = (alert: AlertRow): string => `above ${alert.limitValue} ${showUnit(alert.limitUnit)}`

const RULE_WORDS: Record<string, string> = {
  simple: 'The value as measured is compared with the limit; the uncertainty is stated, not subtracted.',
  rounded:
    'The value rounded to the digits of the limit is compared with it; the uncertainty is stated, not subtracted.',
  guarded: 'The acceptance limit lies below the limit by the expanded uncertainty.',
  'four-zone': 'Four zones around the limit, as wide as the expanded uncertainty.',
}
export const ruleWords = (rule: string): string => RULE_WORDS[rule] ?? rule

const KIND_WORDS: Record<string, string> = {
  mcl: 'maximum contaminant level',
  secondary: 'aesthetic, not a health limit',
  aesthetic: 'aesthetic, not a health limit',
  guideline: 'guideline value',
  indicator: 'indicator parameter',
}
export const limitKindWords = (kind: string): string => KIND_WORDS[kind] ?? kind.replaceAll('-', ' ')

const numberIn = (text: string) => Number(text.replace('<', '').replace('−', '-').trim())
const isUnit = (unit: string): unit is 'mg/L' | 'ug/L' => unit === 'mg/L' || unit === 'ug/L'

/** Earlier results of the point and this one, as a trend: the numbers are the reported ones. */
export function trendOfAlert(alert: AlertView): Trend {
  const unit = isUnit(alert.unit) ? alert.unit : 'mg/L'
  const limitUnit = isUnit(alert.limitUnit) ? alert.limitUnit : unit
  const limit = Number(alert.limitValue)
  const points = [...alert.earlier, { at: alert.collectedAt, text: alert.text, verdict: 'above' }]
    .map((each) => ({
      resultId: alert.resultId,
      at: each.at,
      value: numberIn(each.text),
      text: each.text,
      verdict: each.verdict as Trend['points'][number]['verdict'],
      nonDetect: each.text.startsWith('<'),
    }))
    .filter((point) => Number.isFinite(point.value))
    .toSorted((a, b) => Date.parse(a.at) - Date.parse(b.at))
  return {
    unit,
    limit:
      Number.isFinite(limit) && alert.limitValue !== ''
        ? drawnLimit({ name: alert.limitName, value: alert.limitValue, unit: limitUnit }, unit)
        : null,
    points,
  }
}

/** `Last 12: 0.10 to 0.18 mg/L.` */
export function earlierWords(
  points: readonly { text: string; value: number }[],
  unit: string,
): string | null {
  if (points.length === 0) return null
  const byValue = points.toSorted((a, b) => a.value - b.value)
  const low = byValue[0]?.text ?? ''
  const high = byValue.at(-1)?.text ?? ''
  const range = low === high ? low : `${low} to ${high}`
  return points.length === 1
    ? `The result before: ${low} ${showUnit(unit)}.`
    : `The ${points.length} before: ${range} ${showUnit(unit)}.`
}

export const isAnswered = (alert: Pick<AlertRow, 'state'>): boolean =>
  alert.state !== 'raised' && alert.state !== 'notified'
