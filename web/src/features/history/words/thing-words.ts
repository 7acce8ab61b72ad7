import { paths } from '../../../lib/paths'

interface Thing {
  word: string
  /** the page of the thing itself */
  to?: (id: string) => string
  /** the field of an entry that holds the thing it belongs to, and that one's page */
  within?: { field: string; to: (id: string) => string }
}

/** The tables of the record as people call what is in them. */
const THINGS: Record<string, Thing> = {
  samples: { word: 'Sample', to: paths.sample },
  determinations: { word: 'Determination', within: { field: 'sample_id', to: paths.sample } },
  calibrations: { word: 'Calibration', to: paths.calibration },
  calibration_lots: { word: 'Lot of a calibration', to: paths.calibration },
  calibration_standards: {
    word: 'Standard of a calibration',
    within: { field: 'calibration_id', to: paths.calibration },
  },
  calibration_readings: {
    word: 'Reading of a standard',
    within: { field: 'calibration_id', to: paths.calibration },
  },
  batches: { word: 'Batch', to: paths.batch },
  batch_lots: { word: 'Lot of a batch', to: paths.batch },
  positions: { word: 'Position of a batch', within: { field: 'batch_id', to: paths.batch } },
  position_readings: { word: 'Reading', within: { field: 'batch_id', to: paths.batch } },
  finding_actions: { word: 'Answer to a finding', within: { field: 'batch_id', to: paths.batch } },
  results: { word: 'Result', to: paths.result },
  alerts: { word: 'Alert', to: paths.alert },
  certificates: { word: 'Certificate', to: paths.certificate },
  certificate_openings: {
    word: 'Opening of a certificate',
    within: { field: 'certificate_id', to: paths.certificate },
  },
  signatures: { word: 'Signature' },
  material_lots: { word: 'Lot', to: paths.material },
  instruments: { word: 'Instrument', to: paths.instrument },
  instrument_checks: {
    word: 'Check of an instrument',
    within: { field: 'instrument_id', to: paths.instrument },
  },
  methods: { word: 'Method', to: paths.method },
  programmes: { word: 'Programme', to: () => paths.programmes },
  limits: { word: 'Limit', to: () => paths.programmes },
  clocks: { word: 'Clock of a rule' },
  clients: { word: 'Client', to: paths.client },
  contacts: { word: 'Contact', within: { field: 'client_id', to: paths.client } },
  sampling_points: { word: 'Sampling point', within: { field: 'client_id', to: paths.client } },
  users: { word: 'Account', to: paths.settingsPerson },
  authorisations: { word: 'Authorisation', within: { field: 'user_id', to: paths.settingsPerson } },
  laboratory: { word: 'Laboratory', to: () => paths.settingsLaboratory },
}

const SIGNED: Record<string, (id: string) => string> = {
  calibrations: paths.calibration,
  batches: paths.batch,
  certificates: paths.certificate,
}

/** `position_readings` as words, also where it is not in the list */
export function thingWord(thing: string): string {
  return THINGS[thing]?.word ?? sentenceOf(thing)
}

export function sentenceOf(name: string): string {
  const words = name.replaceAll(/[_-]+/g, ' ').trim()
  return words.charAt(0).toUpperCase() + words.slice(1)
}

interface Entry {
  thing: string
  thingId: string
  old: Record<string, unknown> | null
  new: Record<string, unknown> | null
}

const idIn = (entry: Entry, field: string): string | null => {
  const value = entry.new?.[field] ?? entry.old?.[field]
  return typeof value === 'number' || typeof value === 'string' ? String(value) : null
}

/** Where the thing of an entry, or what it belongs to, can be looked at; null when the entry does not say. */
export function thingPath(entry: Entry): string | null {
  if (entry.thing === 'signatures') {
    const to = SIGNED[idIn(entry, 'thing') ?? '']
    const id = idIn(entry, 'thing_id')
    return to && id ? to(id) : null
  }
  const thing = THINGS[entry.thing]
  if (thing?.to && entry.thingId !== '') return thing.to(entry.thingId)
  const id = thing?.within ? idIn(entry, thing.within.field) : null
  return thing?.within && id ? thing.within.to(id) : null
}
