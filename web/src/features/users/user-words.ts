import type { Mark } from '../../ui'
import type { Authorisation } from './api/user-queries'

export const ACTIVITY_WORDS: Record<Authorisation['activity'], string> = {
  read: 'Measures',
  'sign-calibration': 'Signs calibrations',
  review: 'Reviews results',
}
export const ACTIVITIES = [
  'read',
  'sign-calibration',
  'review',
] as const satisfies Authorisation['activity'][]

const DAY = 86_400_000
const SOON_DAYS = 30

/** Whether an authorisation holds on a day, in words. */
export function authorisationMark(
  of: Pick<Authorisation, 'validFrom' | 'validUntil' | 'inForce'>,
  today: string,
): Mark {
  if (of.validFrom > today) return { word: `begins ${of.validFrom}`, shape: 'ring', tone: 'quiet' }
  if (!of.inForce) return { word: `ended ${of.validUntil}`, shape: 'triangle', tone: 'above' }
  const left = Math.round((Date.parse(of.validUntil) - Date.parse(today)) / DAY)
  if (left <= SOON_DAYS)
    return { word: left === 1 ? '1 day left' : `${left} days left`, shape: 'diamond', tone: 'caution' }
  return { word: 'in force', shape: 'disc', tone: 'meets' }
}
