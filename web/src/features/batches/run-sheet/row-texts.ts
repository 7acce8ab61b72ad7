import { convertUnit, roundReported } from '@weirlight/shared/assay'
import type { Assessment, PositionView } from '@weirlight/shared/contracts'
import { STATE_MARKS, type StateMark } from '@weirlight/shared/states'
import { trueMinus } from '../../../lib/true-minus'

export const UNIT_WORDS = { 'mg/L': 'mg/L', 'ug/L': 'µg/L' } as const
export const KIND_WORDS: Record<PositionView['kind'], string> = {
  blank: 'blank',
  verification: 'verification',
  'method-blank': 'method blank',
  control: 'control',
  sample: 'sample',
  duplicate: 'duplicate',
  spike: 'spike',
}
export type Assessed = Pick<PositionView, 'kind' | 'reporting'>

const FLAG_WORDS: Record<string, string> = {
  'not-detected': 'not detected',
  estimated: 'estimated',
  'above-range': 'above the curve',
  'below-range': 'below the curve',
  'absorbance-high': 'absorbance high',
  'quantification-above-limit': 'the method cannot see the limit',
  'not-calculable': 'not calculable',
}
const ONLY_OF_SAMPLES = ['not-detected', 'estimated', 'below-range']

/** Flags in words; what is reported of a small value is said of samples alone. */
export function flagWords(row: Assessed, found: Assessment): string[] {
  return found.flags
    .filter((flag) => flag !== 'not-calculable' && (row.kind === 'sample' || !ONLY_OF_SAMPLES.includes(flag)))
    .map((flag) => FLAG_WORDS[flag] ?? flag)
}

const decimalsIn = (text: string) => /\.(\d+)/.exec(text)?.[1]?.length ?? 0

/**
 * Concentration and expanded uncertainty as the sheet shows them: for a sample what would be reported; for quality control the value
 * itself, to the digits its uncertainty leaves meaning.
 */
export function shownNumbers(
  row: Assessed,
  found: Assessment,
): { concentration: string; uncertainty: string } {
  if (found.concentration === null) return { concentration: '', uncertainty: '' }
  if (row.kind === 'sample') {
    return {
      concentration: trueMinus(found.reportedText ?? ''),
      uncertainty: found.uncertaintyText ? `± ${found.uncertaintyText.replace(/^±\s*/, '')}` : '',
    }
  }
  const inUnit = (value: number) =>
    convertUnit({ value, from: 'mg/L', to: found.unit ?? row.reporting.displayUnit })
  const uncertainty = roundReported(inUnit(found.expandedUncertainty ?? 0), {
    to: 'significant',
    digits: 2,
    ties: 'half-even',
  })
  const concentration = roundReported(inUnit(found.concentration), {
    to: 'decimals',
    digits: Math.min(15, decimalsIn(uncertainty)),
    ties: 'half-even',
  })
  return { concentration: trueMinus(concentration), uncertainty: `± ${uncertainty}` }
}

/** The unit a whole column can carry in its head; null where clients are reported in different units. */
export function commonUnit(rows: readonly Assessed[]): keyof typeof UNIT_WORDS | null {
  const [first, ...rest] = new Set(rows.map((row) => row.reporting.displayUnit))
  return first && rest.length === 0 ? first : null
}

export interface Verdict {
  mark: StateMark
  words: string
}

/** What a row comes to: the limit for a sample, the check for quality control; null while nothing is read. */
export function verdictOf(row: Assessed, found: Assessment): Verdict | null {
  if (found.meanAbsorbance === null && found.flags.length === 0) return null
  if (found.flags.includes('not-calculable')) {
    return { mark: { word: 'not calculable', shape: 'triangle', tone: 'above' }, words: 'not calculable' }
  }
  if (row.kind !== 'sample') {
    const words = found.qcText ?? ''
    if (found.qcPassed === null) return { mark: { word: 'not judged', shape: 'ring', tone: 'quiet' }, words }
    return found.qcPassed
      ? { mark: { word: 'passed', shape: 'disc', tone: 'meets' }, words }
      : { mark: { word: 'failed', shape: 'triangle', tone: 'above' }, words }
  }
  if (!found.verdict || !found.limit) {
    return { mark: { word: 'no limit', shape: 'ring', tone: 'quiet' }, words: 'no limit' }
  }
  const mark = STATE_MARKS.verdict[found.verdict]
  const unit = found.limit.unit === row.reporting.displayUnit ? '' : ` ${UNIT_WORDS[found.limit.unit]}`
  const [side, ...rest] = mark.word.split(',')
  return { mark, words: [`${side} ${found.limit.value}${unit}`, ...rest].join(',') }
}
