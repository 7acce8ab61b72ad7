import { z } from 'zod'
import { LIMITS } from '../limits.js'
import { email, id, idParams, name, note, version, versionedReason } from './common.js'
import { defineEndpoint } from './endpoint.js'

export const contactView = z.object({
  id,
  name: z.string(),
  email: z.string(),
  getsAlerts: z.boolean(),
  getsCertificates: z.boolean(),
  version,
})
export const pointKind = z.enum(['source', 'raw', 'treated', 'distribution', 'tap', 'waste'])
export const samplingPointView = z.object({
  id,
  code: z.string(),
  name: z.string(),
  kind: pointKind,
  active: z.boolean(),
  version,
})
export const clientRow = z.object({
  id,
  code: z.string(),
  name: z.string(),
  programmeId: id,
  programmeName: z.string(),
  pointCount: z.number(),
  alertContactCount: z.number(),
  active: z.boolean(),
})
export const clientView = z.object({
  id,
  code: z.string(),
  name: z.string(),
  systemId: z.string(),
  address: z.string(),
  programmeId: id,
  programmeName: z.string(),
  agencyName: z.string(),
  agencyPhone: z.string(),
  contacts: z.array(contactView),
  points: z.array(samplingPointView),
  active: z.boolean(),
  version,
})
export type ClientView = z.infer<typeof clientView>

const code = z
  .string()
  .trim()
  .toUpperCase()
  .regex(/^[A-Z0-9-]{2,12}$/, 'Two to twelve letters, digits or hyphens.')
const clientBody = {
  name,
  systemId: z.string().trim().max(LIMITS.codeLength),
  address: note,
  programmeId: id,
  agencyName: name,
  agencyPhone: name,
}
const contactBody = { name, email, getsAlerts: z.boolean(), getsCertificates: z.boolean() }
const pointBody = { code, name, kind: pointKind }

export const listClients = defineEndpoint({
  name: 'listClients',
  summary: 'Client utilities',
  method: 'GET',
  path: '/clients',
  permission: 'clients.read',
  response: z.object({ items: z.array(clientRow) }),
})
export const getClient = defineEndpoint({
  name: 'getClient',
  summary: 'One client with contacts and sampling points',
  method: 'GET',
  path: '/clients/:id',
  permission: 'clients.read',
  params: idParams,
  response: clientView,
})
export const addClient = defineEndpoint({
  name: 'addClient',
  summary: 'Add a client',
  method: 'POST',
  path: '/clients',
  permission: 'clients.manage',
  body: z.object({ code, ...clientBody }),
  response: clientView,
})
export const changeClient = defineEndpoint({
  name: 'changeClient',
  summary: 'Change a client',
  method: 'PUT',
  path: '/clients/:id',
  permission: 'clients.manage',
  params: idParams,
  body: z.object({ ...clientBody, version, reason: note.optional() }),
  response: clientView,
})
export const addContact = defineEndpoint({
  name: 'addContact',
  summary: 'Add a contact',
  method: 'POST',
  path: '/clients/:id/contacts',
  permission: 'clients.manage',
  params: idParams,
  body: z.object(contactBody),
  response: clientView,
})
export const changeContact = defineEndpoint({
  name: 'changeContact',
  summary: 'Change a contact; a changed address is told to the old one too',
  method: 'PUT',
  path: '/contacts/:id',
  permission: 'clients.manage',
  params: idParams,
  body: z.object({ ...contactBody, version }),
  response: clientView,
})
export const removeContact = defineEndpoint({
  name: 'removeContact',
  summary: 'Stop writing to a contact',
  method: 'POST',
  path: '/contacts/:id/remove',
  permission: 'clients.manage',
  params: idParams,
  body: versionedReason,
  response: clientView,
})
export const addPoint = defineEndpoint({
  name: 'addPoint',
  summary: 'Add a sampling point',
  method: 'POST',
  path: '/clients/:id/points',
  permission: 'clients.manage',
  params: idParams,
  body: z.object(pointBody),
  response: clientView,
})
export const changePoint = defineEndpoint({
  name: 'changePoint',
  summary: 'Change a sampling point',
  method: 'PUT',
  path: '/points/:id',
  permission: 'clients.manage',
  params: idParams,
  body: z.object({ name, kind: pointKind, active: z.boolean(), version }),
  response: clientView,
})
export const clientEndpoints = [
  listClients,
  getClient,
  addClient,
  changeClient,
  addContact,
  changeContact,
  removeContact,
  addPoint,
  changePoint,
]
