import { z } from 'zod'
import { email, name, note, version } from './common.js'
import { defineEndpoint } from './endpoint.js'

export const laboratoryView = z.object({
  name: z.string(),
  address: z.string(),
  accreditation: z.string(),
  timeZone: z.string(),
  email: z.string(),
  phone: z.string(),
  version,
})
export const getLaboratory = defineEndpoint({
  name: 'getLaboratory',
  summary: 'The laboratory',
  method: 'GET',
  path: '/laboratory',
  permission: 'laboratory.read',
  response: laboratoryView,
})
export const changeLaboratory = defineEndpoint({
  name: 'changeLaboratory',
  summary: 'Change what certificates and mails say of the laboratory',
  method: 'PUT',
  path: '/laboratory',
  permission: 'laboratory.manage',
  body: z.object({ name, address: note.min(1), accreditation: name, email, phone: name, version }),
  response: laboratoryView,
})
export const laboratoryEndpoints = [getLaboratory, changeLaboratory]
