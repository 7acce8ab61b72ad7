import { sentenceOf } from './thing-words'

/** Names of fields that do not read well by themselves. */
const FIELDS: Record<string, string> = {
  id: 'Record number',
  number: 'Number',
  ph: 'pH',
  temperature_c: 'Temperature, °C',
  client_id: 'Client',
  user_id: 'Person',
  by_id: 'Person',
  method_id: 'Method',
  instrument_id: 'Instrument',
  calibration_id: 'Calibration',
  batch_id: 'Batch',
  sample_id: 'Sample',
  determination_id: 'Determination',
  position_id: 'Position',
  of_position_id: 'Of position',
  result_id: 'Result',
  certificate_id: 'Certificate',
  lot_id: 'Lot',
  stock_lot_id: 'Stock lot',
  parent_id: 'Made from',
  programme_id: 'Programme',
  sampling_point_id: 'Sampling point',
  standard_id: 'Standard',
  limit_id: 'Limit',
  supersedes_id: 'Replaces reading',
  amends_id: 'Amends',
  upload_id: 'File',
  draft_id: 'Form it came from',
  password_hash: 'Passphrase',
  absorbance: 'Absorbance',
  absorbance_text: 'Absorbance, as typed',
  concentration_text: 'Concentration, as typed',
  uncertainty_text: 'Uncertainty, as written',
  value_text: 'Value, as written',
  cell_path_cm: 'Cell path, cm',
  bandwidth_nm: 'Bandwidth, nm',
  wavelength_nm: 'Wavelength, nm',
  read_by: 'Read by',
  read_at: 'Read at',
  holding_due_at: 'To be read by',
  holding_rule: 'Holding-time rule',
  gets_alerts: 'Gets alerts',
  gets_certificates: 'Gets certificates',
  filtered_in_field: 'Filtered in the field',
  content_sha256: 'SHA-256 of what was signed',
  sha256: 'SHA-256',
  stored: 'Fit as computed',
  inputs: 'What the engine was given',
  rules: 'Rules it is judged by',
  definition: 'Catalogue entry',
  snapshot: 'Content of the certificate',
  content: 'What was signed',
}

export function fieldWord(field: string): string {
  return FIELDS[field] ?? sentenceOf(field.replace(/_id$/, '').replace(/_text$/, ', as written'))
}

/** Counters that change with every save and say nothing to a reader. */
const NOISE: ReadonlySet<string> = new Set(['version'])

/** What a reader looks for first. */
const FIRST = [
  'number',
  'state',
  'name',
  'absorbance_text',
  'concentration_text',
  'reported_text',
  'analyte',
  'form',
  'method_id',
  'kind',
  'activity',
  'meaning',
  'passed',
  'position',
  'replicate',
  'purpose',
  'verdict',
]
const placeOf = (field: string) => (FIRST.includes(field) ? FIRST.indexOf(field) : FIRST.length)

/** Every field of an entry, what a reader looks for first, counters left out. */
export function fieldsOf(entry: {
  old: Record<string, unknown> | null
  new: Record<string, unknown> | null
}): string[] {
  const names = new Set([...Object.keys(entry.new ?? {}), ...Object.keys(entry.old ?? {})])
  return [...names].filter((name) => !NOISE.has(name)).toSorted((a, b) => placeOf(a) - placeOf(b))
}

/** Fields of a new row that say nothing: empty ones. */
export function isEmptyValue(value: unknown): boolean {
  if (value === null || value === undefined || value === '') return true
  if (Array.isArray(value)) return value.length === 0
  return typeof value === 'object' && Object.keys(value).length === 0
}
