import { paths } from '@weirlight/shared/paths'
import type { TodayLine } from './house-lines.js'
import type { TodayRepository } from './today.repository.js'

type Missing = NonNullable<Awaited<ReturnType<TodayRepository['missing']>>>

/** Who puts it right: the administrator has the people, the QA manager the rules, whoever works at the bench the rest. */
type Part = 'people' | 'rules' | 'bench'

const LINES: Record<keyof Missing, { part: Part } & Pick<TodayLine, 'title' | 'detail' | 'action' | 'to'>> = {
  technician: {
    part: 'people',
    title: 'No technician has an account yet',
    detail: 'Technicians receive samples, calibrate and take readings.',
    action: 'Invite one',
    to: paths.settingsPeople,
  },
  manager: {
    part: 'people',
    title: 'No QA manager has an account yet',
    detail: 'Calibrations are signed and results released by somebody who did not prepare them.',
    action: 'Invite one',
    to: paths.settingsPeople,
  },
  client: {
    part: 'rules',
    title: 'No client is recorded yet',
    detail: 'Samples belong to a client, with its sampling points, contacts and programme.',
    action: 'Add a client',
    to: paths.newClient,
  },
  authorisation: {
    part: 'rules',
    title: 'Nobody is authorised yet',
    detail: 'Without an authorisation in force nobody measures, signs or reviews.',
    action: 'Choose a person',
    to: paths.settingsPeople,
  },
  instrument: {
    part: 'bench',
    title: 'No instrument is recorded yet',
    detail: 'Readings are taken on an instrument whose checks are in date.',
    action: 'Add an instrument',
    to: paths.newInstrument,
  },
  lot: {
    part: 'bench',
    title: 'No reagent or standard is recorded yet',
    detail: 'A calibration stands on the lot of its stock.',
    action: 'Record a lot',
    to: paths.newMaterial,
  },
  calibration: {
    part: 'bench',
    title: 'No calibration was made yet',
    detail: 'Only a signed calibration in force can carry results.',
    action: 'Start one',
    to: paths.newCalibration,
  },
}

const AT_ONCE = { at: null, sense: 'none', prefix: 'to begin with' } as const

/** The steps of a laboratory that begins, in the order in which they can be taken. */
export function missingLines(missing: Missing | undefined, part: Part): TodayLine[] {
  if (!missing) return []
  const isWanted = { ...missing, calibration: missing.calibration && !missing.instrument && !missing.lot }
  return Object.entries(LINES).flatMap(([name, { part: whose, ...line }]) => {
    if (whose !== part || !isWanted[name as keyof Missing]) return []
    return [{ ...line, key: `missing-${name}`, kind: 'set-up', clock: AT_ONCE, tone: 'quiet' }]
  })
}
