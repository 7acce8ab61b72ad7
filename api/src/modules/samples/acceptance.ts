import { AssayError, holdTime } from '@weirlight/shared/assay'
import type {
  acceptanceCheck,
  container,
  preservation,
  purpose,
  sampleView,
} from '@weirlight/shared/contracts'
import type { z } from 'zod'
import { engineRule, type Kept } from './holding.js'
import type { HoldRule, MethodRules } from './method-rules.js'

export type AcceptanceCheck = z.infer<typeof acceptanceCheck>
export type Verdict = z.infer<typeof sampleView>['suggested']

export interface SampleToCheck {
  purpose: z.infer<typeof purpose>
  programmeCode: string
  clientActive: boolean
  pointActive: boolean
  collectedAt: Date
  receivedAt: Date
  collectedBy: string
  preservation: z.infer<typeof preservation>
  ph: string
  temperatureC: string
  container: z.infer<typeof container>
  filteredInField: boolean
  /** of determinations not withdrawn */
  methods: readonly MethodRules[]
}

interface Found {
  ok: boolean
  finding: string
  /** fails a compliance sample outright, or asks for a qualification only */
  weight?: 'reject' | 'qualify'
}

const PRESERVATION_WORDS = {
  none: 'no preservation',
  'nitric-acid': 'nitric acid',
  'ammonium-sulfate-buffer': 'ammonium sulfate buffer',
} as const

const passed = (finding: string): Found => ({ ok: true, finding })
const failed = (finding: string, weight: 'reject' | 'qualify' = 'reject'): Found => ({
  ok: false,
  finding,
  weight,
})
const numberOf = (text: string) => (text.trim() === '' ? null : Number(text))

/**
 * The acceptance policy (reference: 40 CFR 136 Table II for preservation and holding; Wis. NR 149 sample acceptance
 * rule for what follows): every check with what was found, and the verdict they lead to. A compliance sample that
 * fails is rejected unless the client asks in writing to go on; another is qualified. Pure.
 */
export function checkAcceptance(
  sample: SampleToCheck,
  at: Date,
): { checks: AcceptanceCheck[]; suggested: Verdict } {
  const found: [string, Found][] = [
    ['Form complete', completeForm(sample)],
    ['Client and sampling point', activeClient(sample)],
    ['Times in order', timesInOrder(sample, at)],
    ...sample.methods.map((method): [string, Found] => [
      `Holding time: ${method.title}`,
      holdingTimeLeft(sample, method, at),
    ]),
    ...oncePerRule(sample).map((hold): [string, Found] => [
      `Preservation: ${hold.code}`,
      preserved(sample, hold),
    ]),
    ['Temperature at receipt', temperature(sample)],
    ['Container', rightContainer(sample)],
    ['Filtered in the field', filtered(sample)],
    ...sample.methods.map((method): [string, Found] => [
      `Method for this purpose: ${method.title}`,
      allowedFor(sample, method),
    ]),
  ]
  const checks = found.map(([check, { ok, finding }]) => ({ check, ok, finding }))
  const bad = found.flatMap(([, one]) => (one.ok ? [] : [one]))
  const isRejected = sample.purpose === 'compliance' && bad.some(({ weight }) => weight === 'reject')
  const suggested = bad.length === 0 ? 'accepted' : isRejected ? 'rejected' : 'accepted-with-qualification'
  return { checks, suggested }
}

function completeForm(sample: SampleToCheck): Found {
  const missing = [
    ...(sample.collectedBy.trim() === '' ? ['who collected it'] : []),
    ...(sample.methods.length === 0 ? ['what to determine'] : []),
  ]
  return missing.length === 0 ? passed('Every entry is there.') : failed(`Missing: ${missing.join(', ')}.`)
}

function activeClient(sample: SampleToCheck): Found {
  if (!sample.clientActive) return failed('The client is no longer active.', 'qualify')
  if (!sample.pointActive) return failed('The sampling point is no longer in use.', 'qualify')
  return passed('Both are active.')
}

function timesInOrder(sample: SampleToCheck, at: Date): Found {
  if (sample.collectedAt > at) return failed('Collected in the future: check the date.')
  if (sample.receivedAt < sample.collectedAt) return failed('Received before it was collected.')
  return passed('Collected, then received.')
}

function holdingTimeLeft(sample: Kept, method: MethodRules, at: Date): Found {
  try {
    const { remainingHours, state, hours } = holdTime({
      collectedAt: sample.collectedAt,
      preservation: {
        kind: sample.preservation,
        pH: numberOf(sample.ph),
        temperatureC: numberOf(sample.temperatureC),
      },
      rule: engineRule(method.holdTime),
      at: at < sample.collectedAt ? sample.collectedAt : at,
    })
    if (state === 'breached') return failed(`Over by ${span(-remainingHours)}; ${span(hours)} were allowed.`)
    return passed(
      `${span(remainingHours)} left of ${span(hours)}${state === 'soon' ? ': read it soon' : ''}.`,
    )
  } catch (error) {
    if (error instanceof AssayError) return failed(error.message)
    throw error
  }
}

function span(hours: number): string {
  if (hours >= 72) return `${Math.floor(hours / 24)} days`
  if (hours >= 1) return `${Math.floor(hours)} h ${Math.floor((hours % 1) * 60)} min`
  return `${Math.max(0, Math.floor(hours * 60))} min`
}

/** Determinations that follow the same rule are told once. */
function oncePerRule(sample: SampleToCheck): HoldRule[] {
  return [...new Map(sample.methods.map(({ holdTime: hold }) => [hold.code, hold])).values()]
}

function preserved(sample: SampleToCheck, hold: HoldRule): Found {
  const words = PRESERVATION_WORDS[sample.preservation]
  const shorter = `${span(hold.rule.hours)} of holding time count instead`
  if (sample.preservation === 'none')
    return passed(`Not preserved: ${span(hold.rule.hours)} from collection.`)
  const condition = hold.rule.conditions.find(({ preservation }) => preservation === sample.preservation)
  if (!condition) return failed(`The rule for this determination does not allow ${words}.`)
  const { minPH, maxPH, maxTemperatureC } = condition
  const ph = numberOf(sample.ph)
  if ((minPH !== undefined || maxPH !== undefined) && ph === null) {
    return failed(`${sentence(words)} was not verified: no pH was measured; ${shorter}.`)
  }
  if (ph !== null && ((minPH !== undefined && ph < minPH) || (maxPH !== undefined && ph > maxPH))) {
    return failed(`pH ${sample.ph} with ${words}; ${wantedPh(minPH, maxPH)} is needed; ${shorter}.`)
  }
  const temperatureC = numberOf(sample.temperatureC)
  if (maxTemperatureC !== undefined && (temperatureC === null || temperatureC > maxTemperatureC)) {
    return failed(`${sentence(words)} needs a record of at most ${maxTemperatureC} °C; ${shorter}.`)
  }
  return passed(`${sentence(words)} verified${ph === null ? '' : ` at pH ${sample.ph}`}.`)
}

const sentence = (words: string) => words.charAt(0).toUpperCase() + words.slice(1)

function wantedPh(low: number | undefined, high: number | undefined): string {
  if (low === undefined) return `at most ${high}`
  return high === undefined ? `at least ${low}` : `${low} to ${high}`
}

/** Only where a rule speaks of temperature; the strictest one counts. */
function temperature(sample: SampleToCheck): Found {
  const asked = sample.methods.flatMap(({ holdTime: hold }) =>
    hold.rule.conditions.flatMap(({ maxTemperatureC }) =>
      maxTemperatureC === undefined ? [] : [maxTemperatureC],
    ),
  )
  if (asked.length === 0) {
    return passed(sample.temperatureC === '' ? 'Not asked for.' : `${sample.temperatureC} °C, not asked for.`)
  }
  const most = Math.min(...asked)
  const found = numberOf(sample.temperatureC)
  if (found === null) return failed(`Not recorded; at most ${most} °C is asked for.`)
  return found <= most
    ? passed(`${sample.temperatureC} °C.`)
    : failed(`${sample.temperatureC} °C; at most ${most} °C is asked for.`)
}

function rightContainer(sample: SampleToCheck): Found {
  const wrong = sample.methods.filter(({ container }) => !container.includes(sample.container))
  const [first] = wrong
  return first
    ? failed(`${sentence(sample.container)}; ${first.title} needs ${first.container}.`)
    : passed(`${sentence(sample.container)}, as the methods ask.`)
}

function filtered(sample: SampleToCheck): Found {
  if (!sample.methods.some(({ form }) => form === 'dissolved')) {
    return passed(sample.filteredInField ? 'Filtered; not asked for.' : 'Not asked for.')
  }
  return sample.filteredInField
    ? passed('Recorded.')
    : failed('A dissolved metal is wanted, and no filtration in the field is recorded.')
}

function allowedFor(sample: SampleToCheck, method: MethodRules): Found {
  if (!method.active) return failed('The method is no longer in use.')
  if (sample.purpose === 'operational') return passed('Operational results may be reported by it.')
  const approval = method.approvals.find(
    (one) =>
      one.programme === sample.programmeCode && one.analyte === method.analyte && one.form === method.form,
  )
  if (!approval) return failed('The approval table says nothing of it under this programme.', 'qualify')
  if (approval.status === 'approved') return passed(approval.statement)
  return failed(approval.statement, approval.status === 'ask' ? 'qualify' : 'reject')
}
