import {
  finiteResult,
  requireArray,
  requireFinite,
  requireObject,
  requirePositive,
} from './argument-checks.js'
import { AssayError } from './assay-error.js'

const HOUR = 3_600_000

/** How the sample was kept: a name of the catalogue, or with what was measured at receipt. */
export type Preservation = string | { kind: string; pH?: number | null; temperatureC?: number | null }

export interface HoldTimeRule {
  /** when no condition below is met */
  hours: number
  /** a longer time that only holds for a preservation that was really done */
  conditions?: readonly {
    preservation: string
    hours: number
    minPH?: number | undefined
    maxPH?: number | undefined
    maxTemperatureC?: number | undefined
  }[]
  /** how long before the end the state turns to 'soon'; a quarter of the time, at most a week, when left out */
  soonWithinHours?: number | undefined
}

export interface HoldTimeInput {
  /** ISO 8601 with offset, or a Date */
  collectedAt: string | Date
  preservation: Preservation
  rule: HoldTimeRule
  /** the moment asked about: now, or when the reading was taken */
  at: string | Date
}

function readInstant(value: unknown, what: string): number {
  if (value instanceof Date) {
    const time = value.getTime()
    if (Number.isFinite(time)) return time
  }
  if (typeof value === 'string' && /^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}.*(Z|[+-]\d{2}:?\d{2})$/.test(value)) {
    const time = Date.parse(value)
    if (Number.isFinite(time)) return time
  }
  throw new AssayError('invalid-time', `The ${what} needs a date, a time and its offset from UTC.`)
}

/** A condition asks for evidence: what was not measured does not count as met. */
function isWithin(measured: unknown, range: { low: unknown; high: unknown; what: string }): boolean {
  const low = range.low === undefined ? null : requireFinite(range.low, range.what)
  const high = range.high === undefined ? null : requireFinite(range.high, range.what)
  if (low === null && high === null) return true
  if (measured === null || measured === undefined) return false
  const value = requireFinite(measured, range.what)
  return (low === null || value >= low) && (high === null || value <= high)
}

function hoursFor(rule: HoldTimeRule, preservation: Preservation): { hours: number; because: string } {
  const kept: Exclude<Preservation, string> =
    typeof preservation === 'string' ? { kind: preservation } : preservation
  let best = { hours: requirePositive(rule.hours, 'holding time'), because: 'the rule without conditions' }
  for (const condition of requireArray(rule.conditions ?? [], 'conditions of the holding time')) {
    requireObject(condition, 'condition of the holding time')
    const hours = requirePositive(condition.hours, 'holding time')
    if (condition.preservation !== kept.kind || hours <= best.hours) continue
    const { minPH, maxPH, maxTemperatureC } = condition
    if (!isWithin(kept.pH, { low: minPH, high: maxPH, what: 'pH' })) continue
    if (!isWithin(kept.temperatureC, { low: undefined, high: maxTemperatureC, what: 'temperature' })) continue
    best = { hours, because: `preserved: ${condition.preservation}` }
  }
  return best
}

/**
 * Until when a sample may be analysed, and how that stands at a given moment.
 *
 * The field disagrees about chromium(VI): 24 hours (SW-846 Method 7196A, CLP) against 28 days with the ammonium
 * sulfate buffer at pH 9.3 to 9.7 and at most 6 °C (40 CFR 136.3 Table II, note 20). The rule carries both: `hours`
 * is what holds without evidence, `conditions` what the recorded preservation earns. A condition on pH or temperature
 * is met only by a recorded pH or temperature. Metals in acid: 6 months, kept as 180 days (4320 hours).
 *
 * The end itself is still in time: at dueAt the state is 'soon' and no hours remain.
 *
 * @returns dueAt (ISO 8601, UTC), remainingHours (negative once breached), state, hours and why they hold
 * @throws AssayError invalid-time: no date, time and offset; time-order: asked about before collection;
 *         invalid-argument: a holding time of zero or less
 */
export function holdTime(input: HoldTimeInput) {
  requireObject(input, 'holding time')
  requireObject(input.rule, 'rule for the holding time')
  const collected = readInstant(input.collectedAt, 'time of collection')
  const at = readInstant(input.at, 'time asked about')
  if (typeof input.preservation !== 'string') requireObject(input.preservation, 'preservation')
  if (at < collected) {
    throw new AssayError('time-order', 'The time asked about lies before the time of collection.')
  }
  const { hours, because } = hoursFor(input.rule, input.preservation)
  const due = collected + hours * HOUR
  // beyond this JavaScript has no date
  if (due > 8.64e15) throw new AssayError('invalid-time', 'The holding time ends beyond any calendar date.')
  const soonWithin =
    input.rule.soonWithinHours === undefined
      ? Math.min(hours / 4, 168)
      : requireFinite(input.rule.soonWithinHours, 'warning time')
  const remainingHours = finiteResult((due - at) / HOUR, 'remaining time')
  const state: 'ok' | 'soon' | 'breached' =
    remainingHours < 0 ? 'breached' : remainingHours <= soonWithin ? 'soon' : 'ok'
  return {
    dueAt: new Date(due).toISOString(),
    remainingHours,
    state,
    hours,
    because,
    method: 'holding time counted from collection',
  }
}
