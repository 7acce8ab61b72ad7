import {
  alertStates,
  batchStates,
  calibrationStates,
  certificateStates,
  determinationStates,
  resultStates,
  sampleStates,
} from '@weirlight/shared/states'
import { ROLE_NAMES } from '@weirlight/shared/permissions'
import { ANALYTE_NAMES, showUnit } from '@weirlight/shared/contracts'

const STATES: Record<string, Record<string, string>> = {
  samples: sampleStates.words,
  determinations: determinationStates.words,
  calibrations: calibrationStates.words,
  batches: batchStates.words,
  results: resultStates.words,
  alerts: alertStates.words,
  certificates: certificateStates.words,
}

export interface Names {
  people: ReadonlyMap<string, string>
  clients: ReadonlyMap<string, string>
  methods: ReadonlyMap<string, string>
  limits: ReadonlyMap<string, string>
}

const INSTANT = /^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}:\d{2}(\.\d+)?([+-]\d{2}:?\d{2}|Z)$/
const PERSON_FIELD = /(_by|^user_id|^by_id|^actor_id)$/

const ROLE_WORDS: Record<string, string> = ROLE_NAMES
const METAL_WORDS: Record<string, string> = ANALYTE_NAMES

interface Given {
  thing: string
  field: string
  value: unknown
  names: Names
  at: (instant: string) => string
}

/** A stored value as a person reads it; null where there is nothing. Whatever has no words is shown as it is stored. */
export function valueWord({ thing, field, value, names, at }: Given): string | null {
  if (value === null || value === undefined || value === '') return null
  if (typeof value === 'boolean') return value ? 'yes' : 'no'
  if (typeof value === 'object') return JSON.stringify(value, null, 2)
  const text = String(value as string | number)
  if (PERSON_FIELD.test(field)) return names.people.get(text) ?? `person ${text}`
  if (field === 'client_id') return names.clients.get(text) ?? `client ${text}`
  if (field === 'method_id') return names.methods.get(text) ?? `method ${text}`
  if (field === 'limit_id') return names.limits.get(text) ?? `limit ${text}`
  if (field === 'state') return STATES[thing]?.[text] ?? text.replaceAll('-', ' ')
  if (field === 'role') return ROLE_WORDS[text] ?? text
  if (field === 'analyte') return METAL_WORDS[text] ?? text
  if (field === 'unit' || field === 'display_unit') return showUnit(text)
  if (INSTANT.test(text)) return at(text)
  if (text === '(hidden)') return 'not shown'
  return text
}

/** Whether a value wants lines of its own. */
export const isLong = (words: string | null): boolean =>
  words !== null && (words.length > 90 || words.includes('\n'))
