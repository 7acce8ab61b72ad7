import type { Role } from '@weirlight/shared/permissions'
import type { Mark } from '../../ui'
import type { Authorisation, UserView } from './api/user-queries'

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

export const ROLE_HINTS: Record<Role, string> = {
  technician: 'Receives, calibrates and measures.',
  'qa-manager': 'Signs calibrations, reviews and releases; issues certificates.',
  client: 'Sees the results of one utility, and nothing of others.',
  auditor: 'Sees everything and changes nothing.',
  administrator: 'Looks after people, mail and the laboratory’s particulars.',
}

/** Authorisations are for work at the bench. */
export const mayBeAuthorised = (person: Pick<UserView, 'role'>): boolean =>
  person.role === 'technician' || person.role === 'qa-manager'
