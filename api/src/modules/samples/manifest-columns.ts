import type { NamedColumn } from '../../platform/index.js'

export type ManifestColumn =
  | 'client'
  | 'point'
  | 'purpose'
  | 'kind'
  | 'collectedAt'
  | 'collectedBy'
  | 'receivedAt'
  | 'preservation'
  | 'ph'
  | 'temperatureC'
  | 'container'
  | 'filteredInField'
  | 'condition'
  | 'remarks'
  | 'determinations'

/** In the order of the sheet we hand out. */
export const MANIFEST_COLUMNS: readonly NamedColumn<ManifestColumn>[] = [
  { key: 'client', title: 'Client', otherNames: ['client code', 'utility', 'client name'], isRequired: true },
  {
    key: 'point',
    title: 'Sampling point',
    otherNames: ['point', 'point code', 'sampling point code', 'location'],
    isRequired: true,
  },
  { key: 'purpose', title: 'Purpose', isRequired: true },
  { key: 'kind', title: 'Kind', otherNames: ['kind of sample', 'sample kind'] },
  {
    key: 'collectedAt',
    title: 'Collected at',
    otherNames: ['collected', 'date and time collected', 'collection time', 'sampled at'],
    isRequired: true,
  },
  { key: 'collectedBy', title: 'Collected by', otherNames: ['sampler', 'sampled by'], isRequired: true },
  { key: 'receivedAt', title: 'Received at', otherNames: ['received'] },
  {
    key: 'preservation',
    title: 'Preservation',
    otherNames: ['preserved with', 'preservative'],
    isRequired: true,
  },
  { key: 'ph', title: 'pH', otherNames: ['ph at receipt'] },
  { key: 'temperatureC', title: 'Temperature, °C', otherNames: ['temperature', 'temp c', 'temp'] },
  { key: 'container', title: 'Container', otherNames: ['bottle'], isRequired: true },
  { key: 'filteredInField', title: 'Filtered in field', otherNames: ['filtered', 'field filtered'] },
  { key: 'condition', title: 'Condition', otherNames: ['condition at receipt'] },
  { key: 'remarks', title: 'Remarks', otherNames: ['remark', 'notes', 'comment'] },
  {
    key: 'determinations',
    title: 'Determinations',
    otherNames: ['determination', 'analyses', 'tests', 'methods', 'parameters'],
    isRequired: true,
  },
]

export const PURPOSES = {
  compliance: 'compliance',
  operational: 'operational',
  operation: 'operational',
} as const
export const KINDS = {
  '': 'routine',
  routine: 'routine',
  confirmation: 'confirmation',
  raw: 'raw',
  process: 'process',
  special: 'special',
} as const
export const PRESERVATIONS = {
  none: 'none',
  no: 'none',
  unpreserved: 'none',
  'nitric acid': 'nitric-acid',
  hno3: 'nitric-acid',
  'ammonium sulfate buffer': 'ammonium-sulfate-buffer',
  'ammonium sulphate buffer': 'ammonium-sulfate-buffer',
} as const
export const CONTAINERS = {
  plastic: 'plastic',
  polyethylene: 'plastic',
  fluoropolymer: 'fluoropolymer',
  glass: 'glass',
} as const
export const YES_NO = {
  '': false,
  no: false,
  n: false,
  false: false,
  '0': false,
  yes: true,
  y: true,
  true: true,
  '1': true,
} as const
