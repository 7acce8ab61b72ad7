import type { Mark } from '../../ui'
import type { MaterialKind, MaterialRow } from './api/material-queries'

export const KIND_WORDS: Record<MaterialKind, string> = {
  reagent: 'Reagent',
  stock: 'Stock standard',
  'working-standard': 'Working standard',
  control: 'Control material',
  'second-source': 'Second source',
}
export const KIND_HINTS: Record<MaterialKind, string> = {
  reagent: 'Colour reagent, buffer, reductant, acid.',
  stock: 'Bought, with a certificate; working standards are made from it.',
  'working-standard': 'Made here from another lot, with its recipe.',
  control: 'Measured in every batch to see whether the method holds.',
  'second-source': 'From another producer or lot than the stock, to check the calibration.',
}
export const KINDS = [
  'reagent',
  'stock',
  'working-standard',
  'control',
  'second-source',
] as const satisfies MaterialKind[]

const DAY = 86_400_000
const SOON_DAYS = 14

export const daysBetween = (from: string, to: string): number =>
  Math.round((Date.parse(to) - Date.parse(from)) / DAY)

const days = (count: number) => (count === 1 ? '1 day' : `${count} days`)

/** Whether a lot may be worked with on a day, in words. */
export function usableMark(lot: Pick<MaterialRow, 'state' | 'expiresOn' | 'usable'>, today: string): Mark {
  if (lot.state === 'withdrawn') return { word: 'withdrawn', shape: 'triangle', tone: 'above' }
  if (lot.state === 'used-up') return { word: 'used up', shape: 'diamond', tone: 'quiet' }
  const left = daysBetween(today, lot.expiresOn)
  if (left < 0 || !lot.usable) {
    return { word: left < 0 ? `expired ${days(-left)} ago` : 'not usable', shape: 'triangle', tone: 'above' }
  }
  if (left === 0) return { word: 'usable, expires today', shape: 'diamond', tone: 'caution' }
  if (left <= SOON_DAYS) return { word: `usable, ${days(left)} left`, shape: 'diamond', tone: 'caution' }
  return { word: 'usable', shape: 'disc', tone: 'meets' }
}

/** `1000 ± 3 mg/L` */
export function strengthWords(lot: Pick<MaterialRow, 'concentration' | 'uncertainty'>): string {
  if (!lot.concentration) return ''
  return `${lot.concentration}${lot.uncertainty ? ` ± ${lot.uncertainty}` : ''} mg/L`
}
