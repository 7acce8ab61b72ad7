import type { AnalyteCode, readinessLine } from '@weirlight/shared/contracts'
import { paths } from '@weirlight/shared/paths'
import type { z } from 'zod'
import { whyNotUsable, type InstrumentRow } from '../instruments/index.js'
import { whyUnusable, type MaterialRow } from '../materials/index.js'
import type { AuthorisedPerson } from '../users/index.js'
import type { CalibrationInForce } from './in-force.repository.js'

export type ReadinessLine = z.infer<typeof readinessLine>

/** more reagents than these are counted: a wall of numbers says less */
const NAMED_AT_MOST = 3
/** an expired reagent that nobody replaced is asked for this long; later it counts as given up */
const GIVEN_UP_AFTER_DAYS = 60
const DAY = 86_400_000

export interface MethodFacts {
  analyte: AnalyteCode
  today: string
  /** of this method, longest valid first */
  calibrations: readonly CalibrationInForce[]
  instruments: readonly InstrumentRow[]
  materials: readonly MaterialRow[]
  /** authorised to measure by this method, today */
  people: readonly AuthorisedPerson[]
}

/** What stands in the way of starting a method, line by line. */
export function readinessLines(facts: MethodFacts): ReadinessLine[] {
  const best = bestCalibration(facts)
  return [
    calibrationLine(best),
    instrumentLine(facts, best),
    ...reagentLines(facts),
    verificationLine(facts),
    peopleLine(facts),
  ]
}

function instrumentOf(facts: MethodFacts, calibration: CalibrationInForce): InstrumentRow | undefined {
  return facts.instruments.find(({ id }) => id === calibration.instrumentId)
}

/** One on an instrument that may be used today, before one that is valid for longer. */
function bestCalibration(facts: MethodFacts): CalibrationInForce | undefined {
  return facts.calibrations.find((one) => instrumentOf(facts, one)?.usable) ?? facts.calibrations[0]
}

function calibrationLine(best: CalibrationInForce | undefined): ReadinessLine {
  if (!best) {
    return {
      what: 'Calibration',
      ready: false,
      why: 'No calibration is in force.',
      dueAt: null,
      to: paths.newCalibration,
    }
  }
  return {
    what: 'Calibration',
    ready: true,
    why: `${best.number} is in force for the ${best.cellPathCm} cm cell.`,
    dueAt: best.validUntil?.toISOString() ?? null,
    to: paths.calibration(best.id),
  }
}

function instrumentLine(facts: MethodFacts, best: CalibrationInForce | undefined): ReadinessLine {
  const calibrated = best && instrumentOf(facts, best)
  const instrument = calibrated ?? facts.instruments.find(({ usable }) => usable) ?? facts.instruments[0]
  if (!instrument) {
    return {
      what: 'Instrument',
      ready: false,
      why: 'No instrument is recorded.',
      dueAt: null,
      to: paths.instruments,
    }
  }
  return {
    what: 'Instrument',
    ready: instrument.usable,
    why: instrument.usable
      ? `${instrument.number}, ${instrument.name}, is in use and its checks are in date.`
      : whyNotUsable(instrument),
    dueAt: instrument.nextCheckDueOn,
    to: paths.instrument(instrument.id),
  }
}

function reagentLines({ materials, analyte, today }: MethodFacts): ReadinessLine[] {
  const groups = new Map<string, MaterialRow[]>()
  for (const lot of materials) {
    // a reagent of no metal in particular, an acid or a buffer, is every method's
    if (lot.kind !== 'reagent' || (lot.analyte !== null && lot.analyte !== analyte)) continue
    const key = lot.name.trim().toLowerCase()
    groups.set(key, [...(groups.get(key) ?? []), lot])
  }
  const inDate: MaterialRow[] = []
  const missing: MaterialRow[] = []
  for (const lots of groups.values()) {
    const newestFirst = lots.toSorted((a, b) => b.expiresOn.localeCompare(a.expiresOn))
    const usable = newestFirst.find((lot) => lot.usable)
    const [last] = newestFirst
    if (usable) inDate.push(usable)
    else if (last && Date.parse(today) - Date.parse(last.expiresOn) <= GIVEN_UP_AFTER_DAYS * DAY)
      missing.push(last)
  }
  if (inDate.length === 0 && missing.length === 0) {
    return [
      {
        what: 'Reagents',
        ready: false,
        why: 'No reagent lot in date is recorded.',
        dueAt: null,
        to: paths.materials,
      },
    ]
  }
  const lines = missing.map((lot) => ({
    what: 'Reagents',
    ready: false,
    why: whyUnusable(lot),
    dueAt: lot.expiresOn,
    to: paths.material(lot.id),
  }))
  const first = inDate.toSorted((a, b) => a.expiresOn.localeCompare(b.expiresOn))[0]
  if (!first) return lines
  const named = (lot: MaterialRow) => `${lot.number}, ${lot.name}`
  const why =
    inDate.length <= NAMED_AT_MOST
      ? `In date: ${inDate.map(named).join('; ')}.`
      : `All ${inDate.length} in date. First to run out: ${named(first)}.`
  return [
    ...lines,
    {
      what: 'Reagents',
      ready: true,
      why,
      dueAt: first.expiresOn,
      to: paths.material(first.id),
    },
  ]
}

function verificationLine({ materials, analyte }: MethodFacts): ReadinessLine {
  const what = 'Verification standard'
  const lots = materials.filter(
    (lot) => lot.analyte === analyte && (lot.kind === 'second-source' || lot.kind === 'control'),
  )
  const usable = lots.filter((lot) => lot.usable).sort((a, b) => b.expiresOn.localeCompare(a.expiresOn))[0]
  if (usable) {
    const why = `${usable.number}, ${usable.name}, is in date.`
    return { what, ready: true, why, dueAt: usable.expiresOn, to: paths.material(usable.id) }
  }
  const last = lots.toSorted((a, b) => b.expiresOn.localeCompare(a.expiresOn))[0]
  if (!last) {
    const why = 'No second-source or control lot is recorded.'
    return { what, ready: false, why, dueAt: null, to: paths.materials }
  }
  return { what, ready: false, why: whyUnusable(last), dueAt: last.expiresOn, to: paths.material(last.id) }
}

function peopleLine({ people }: MethodFacts): ReadinessLine {
  const what = 'Authorised analyst'
  const last = people.toSorted((a, b) => b.validUntil.localeCompare(a.validUntil))[0]
  if (!last) {
    const why = 'Nobody is authorised to measure by this method today.'
    return { what, ready: false, why, dueAt: null, to: paths.benchPeople }
  }
  const names = [...new Set(people.map(({ name }) => name))]
  const shown = names.slice(0, 3).join(', ')
  const why = names.length > 3 ? `${shown} and ${names.length - 3} more.` : `${shown}.`
  return { what, ready: true, why, dueAt: last.validUntil, to: paths.benchPeople }
}
