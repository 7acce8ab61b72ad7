import { z } from 'zod'
import {
  analyteCode,
  concentrationText,
  day,
  decimalText,
  form,
  id,
  idParams,
  instant,
  name,
  note,
  person,
  version,
  versionedReason,
} from './common.js'
import { defineEndpoint } from './endpoint.js'

/* Methods: the catalogue entry is `methodDefinition` of reference.ts, kept whole in `definition`. */
export const methodRow = z.object({
  id,
  code: z.string(),
  edition: z.string(),
  title: z.string(),
  analyte: analyteCode,
  form,
  wavelengthNm: z.number(),
  active: z.boolean(),
  calibrationsInForce: z.number(),
  determinationsWaiting: z.number(),
})
export const methodView = methodRow.extend({
  definition: z.record(z.string(), z.unknown()),
  /** of the analyte, g/mol, from the reference data: the page needs it to judge a slope */
  molarMass: z.number(),
})
export const listMethods = defineEndpoint({
  name: 'listMethods',
  summary: 'Methods of the laboratory',
  method: 'GET',
  path: '/methods',
  permission: 'methods.read',
  response: z.object({ items: z.array(methodRow) }),
})
export const getMethod = defineEndpoint({
  name: 'getMethod',
  summary: 'One method whole',
  method: 'GET',
  path: '/methods/:id',
  permission: 'methods.read',
  params: idParams,
  response: methodView,
})

/* Limits programmes */
export const limitView = z.object({
  id,
  analyte: analyteCode,
  form,
  kind: z.string(),
  name: z.string(),
  value: z.string(),
  unit: z.enum(['mg/L', 'ug/L']),
  digits: z.number(),
  decisionRule: z.enum(['simple', 'rounded', 'guarded', 'four-zone']),
  source: z.string(),
  edition: z.string(),
  mark: z.string(),
  validFrom: day,
  validUntil: day.nullable(),
})
export const programmeView = z.object({
  id,
  code: z.string(),
  name: z.string(),
  displayUnit: z.enum(['mg/L', 'ug/L']),
  ties: z.enum(['half-up', 'half-even']),
  nonDetect: z.string(),
  note: z.string(),
  limits: z.array(limitView),
  clients: z.array(person),
})
export const listProgrammes = defineEndpoint({
  name: 'listProgrammes',
  summary: 'Programmes with their limits, each with source, edition and date',
  method: 'GET',
  path: '/programmes',
  permission: 'programmes.read',
  response: z.object({ items: z.array(programmeView) }),
})

/* Material lots: reagents, stocks, working standards, control material */
export const materialKind = z.enum(['reagent', 'stock', 'working-standard', 'control', 'second-source'])
export const materialRow = z.object({
  id,
  number: z.string(),
  kind: materialKind,
  name: z.string(),
  analyte: analyteCode.nullable(),
  concentration: z.string().nullable(),
  uncertainty: z.string().nullable(),
  lotCode: z.string(),
  producer: z.string(),
  receivedOn: day,
  openedOn: day.nullable(),
  expiresOn: day,
  parentId: id.nullable(),
  parentNumber: z.string().nullable(),
  state: z.enum(['in-use', 'used-up', 'withdrawn']),
  usable: z.boolean(),
  version,
})
export const materialView = materialRow.extend({
  certificateRef: z.string(),
  recipe: z.string(),
  storage: z.string(),
  hazards: z.string(),
  preparedBy: person.nullable(),
  preparedAt: instant,
  /** this lot back to the certified stock, nearest first */
  ancestry: z.array(materialRow),
  usedIn: z.array(z.object({ kind: z.enum(['calibration', 'batch', 'lot']), id, number: z.string() })),
})
export const addMaterialBody = z
  .object({
    kind: materialKind,
    name,
    analyte: analyteCode.nullable(),
    concentration: concentrationText.nullable(),
    uncertainty: concentrationText.nullable(),
    lotCode: z.string().trim().max(40),
    producer: z.string().trim().max(120),
    certificateRef: z.string().trim().max(120),
    receivedOn: day,
    openedOn: day.nullable(),
    expiresOn: day,
    parentId: id.nullable(),
    recipe: note,
    storage: z.string().trim().max(120),
    hazards: note,
  })
  .superRefine((v, context) => {
    const say = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message })
    if (v.expiresOn <= v.receivedOn) say('expiresOn', 'The lot expires before it was received.')
    if (v.openedOn && v.openedOn < v.receivedOn)
      say('openedOn', 'It cannot be opened before it was received.')
    if (v.kind !== 'reagent' && !v.analyte) say('analyte', 'Say which metal this standard holds.')
    if (v.kind !== 'reagent' && !v.concentration) say('concentration', 'Enter the concentration in mg/L.')
    if (v.kind === 'working-standard' && !v.parentId) say('parentId', 'Choose the lot it was made from.')
    if (v.kind === 'working-standard' && v.recipe.trim() === '')
      say('recipe', 'Say how it was made: volumes, flask, pipette.')
  })
export const listMaterials = defineEndpoint({
  name: 'listMaterials',
  summary: 'Reagent and standard lots',
  method: 'GET',
  path: '/materials',
  permission: 'materials.read',
  query: z.object({
    kind: materialKind.optional(),
    analyte: analyteCode.optional(),
    usable: z.enum(['yes']).optional(),
  }),
  response: z.object({ items: z.array(materialRow) }),
})
export const getMaterial = defineEndpoint({
  name: 'getMaterial',
  summary: 'One lot, where it came from and what it touched',
  method: 'GET',
  path: '/materials/:id',
  permission: 'materials.read',
  params: idParams,
  response: materialView,
})
export const addMaterial = defineEndpoint({
  name: 'addMaterial',
  summary: 'Record a lot',
  method: 'POST',
  path: '/materials',
  permission: 'materials.manage',
  body: addMaterialBody,
  response: materialView,
})
export const finishMaterial = defineEndpoint({
  name: 'finishMaterial',
  summary: 'Record that a lot is used up',
  method: 'POST',
  path: '/materials/:id/finish',
  permission: 'materials.manage',
  params: idParams,
  body: z.object({ version }),
  response: materialView,
})
export const withdrawMaterial = defineEndpoint({
  name: 'withdrawMaterial',
  summary: 'Take a lot out of use',
  method: 'POST',
  path: '/materials/:id/withdraw',
  permission: 'materials.manage',
  params: idParams,
  body: versionedReason,
  response: materialView,
})

/* Instruments and their checks */
export const instrumentRow = z.object({
  id,
  number: z.string(),
  name: z.string(),
  kind: z.string(),
  serial: z.string(),
  location: z.string(),
  state: z.enum(['in-use', 'out-of-use']),
  nextCheckDueOn: day.nullable(),
  usable: z.boolean(),
  version,
})
export const checkKind = z.enum(['wavelength', 'photometric', 'stray-light', 'baseline'])
export const instrumentCheck = z.object({
  id,
  kind: checkKind,
  reference: z.string(),
  nominal: z.string(),
  found: z.string(),
  tolerance: z.string(),
  unit: z.string(),
  passed: z.boolean(),
  checkedAt: instant,
  checkedBy: person,
  nextDueOn: day,
  note: z.string(),
})
export const instrumentView = instrumentRow.extend({
  bandwidthNm: z.string(),
  checks: z.array(instrumentCheck),
  usedIn: z.array(z.object({ kind: z.enum(['calibration', 'batch']), id, number: z.string() })),
})
const measured = decimalText({ low: -1e6, high: 1e6, what: 'value' })
export const listInstruments = defineEndpoint({
  name: 'listInstruments',
  summary: 'Spectrophotometers',
  method: 'GET',
  path: '/instruments',
  permission: 'instruments.read',
  response: z.object({ items: z.array(instrumentRow) }),
})
export const getInstrument = defineEndpoint({
  name: 'getInstrument',
  summary: 'One instrument with its checks',
  method: 'GET',
  path: '/instruments/:id',
  permission: 'instruments.read',
  params: idParams,
  response: instrumentView,
})
export const addInstrument = defineEndpoint({
  name: 'addInstrument',
  summary: 'Add an instrument',
  method: 'POST',
  path: '/instruments',
  permission: 'instruments.manage',
  body: z.object({
    name,
    kind: name,
    serial: z.string().trim().max(40),
    location: name,
    bandwidthNm: decimalText({ low: 0.1, high: 50, what: 'bandwidth', unit: 'nm' }),
  }),
  response: instrumentView,
})
export const recordCheck = defineEndpoint({
  name: 'recordCheck',
  summary: 'Record a check; a failed one takes the instrument out of use',
  method: 'POST',
  path: '/instruments/:id/checks',
  permission: 'instruments.manage',
  params: idParams,
  body: z.object({
    kind: checkKind,
    reference: name,
    nominal: measured,
    found: measured,
    tolerance: measured,
    unit: z.enum(['nm', 'A', '%T']),
    nextDueOn: day,
    note,
  }),
  response: instrumentView,
})
export const takeInstrumentOut = defineEndpoint({
  name: 'takeInstrumentOut',
  summary: 'Take an instrument out of use',
  method: 'POST',
  path: '/instruments/:id/take-out',
  permission: 'instruments.manage',
  params: idParams,
  body: versionedReason,
  response: instrumentView,
})
export const returnInstrument = defineEndpoint({
  name: 'returnInstrument',
  summary: 'Return an instrument to use after a passed check',
  method: 'POST',
  path: '/instruments/:id/return',
  permission: 'instruments.manage',
  params: idParams,
  body: versionedReason,
  response: instrumentView,
})

/* Why work may or may not start */
export const readinessLine = z.object({
  what: z.string(),
  ready: z.boolean(),
  why: z.string(),
  dueAt: z.string().nullable(),
  to: z.string().nullable(),
})
export const getReadiness = defineEndpoint({
  name: 'getReadiness',
  summary: 'For each method: what stands in the way of starting',
  method: 'GET',
  path: '/bench/readiness',
  permission: 'methods.read',
  response: z.object({
    methods: z.array(
      z.object({ methodId: id, title: z.string(), ready: z.boolean(), lines: z.array(readinessLine) }),
    ),
  }),
})
export const benchEndpoints = [
  listMethods,
  getMethod,
  listProgrammes,
  listMaterials,
  getMaterial,
  addMaterial,
  finishMaterial,
  withdrawMaterial,
  listInstruments,
  getInstrument,
  addInstrument,
  recordCheck,
  takeInstrumentOut,
  returnInstrument,
  getReadiness,
]
