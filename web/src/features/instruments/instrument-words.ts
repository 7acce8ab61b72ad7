import type { Mark } from '../../ui'
import type { InstrumentCheck, InstrumentRow } from './api/instrument-queries'

const DAY = 86_400_000
const SOON_DAYS = 14
const days = (count: number) => (count === 1 ? '1 day' : `${count} days`)

/** Whether readings may be taken on it on a day, in words. */
export function instrumentMark(
  instrument: Pick<InstrumentRow, 'state' | 'nextCheckDueOn' | 'usable'>,
  today: string,
): Mark {
  if (instrument.state === 'out-of-use') return { word: 'Out of use', shape: 'triangle', tone: 'above' }
  if (instrument.nextCheckDueOn === null) return { word: 'Never checked', shape: 'triangle', tone: 'above' }
  const left = Math.round((Date.parse(instrument.nextCheckDueOn) - Date.parse(today)) / DAY)
  if (left < 0) return { word: `Check late by ${days(-left)}`, shape: 'triangle', tone: 'above' }
  if (!instrument.usable) return { word: 'Last check failed', shape: 'triangle', tone: 'above' }
  if (left <= SOON_DAYS) {
    return {
      word: left === 0 ? 'In use, check due today' : `In use, check due in ${days(left)}`,
      shape: 'diamond',
      tone: 'caution',
    }
  }
  return { word: 'In use', shape: 'disc', tone: 'meets' }
}

export const CHECK_WORDS: Record<InstrumentCheck['kind'], string> = {
  wavelength: 'Wavelength',
  photometric: 'Photometric scale',
  'stray-light': 'Stray light',
  baseline: 'Baseline',
}
export const CHECK_UNITS: Record<InstrumentCheck['kind'], 'nm' | 'A' | '%T'> = {
  wavelength: 'nm',
  photometric: 'A',
  'stray-light': '%T',
  baseline: 'A',
}
export const PASSED: Mark = { word: 'passed', shape: 'disc', tone: 'meets' }
export const FAILED: Mark = { word: 'failed', shape: 'triangle', tone: 'above' }
