import { analyteCode, pointKind } from '@weirlight/shared/contracts'
import { ROLES } from '@weirlight/shared/permissions'
import { z } from 'zod'
import { readFixture } from '../platform/files/fixtures.js'

const person = z.object({ role: z.enum(ROLES), name: z.string(), email: z.string() })
const demoData = z.object({
  seed: z.number(),
  laboratory: z.object({
    name: z.string(),
    address: z.string(),
    accreditation: z.string(),
    timeZone: z.string(),
    email: z.string(),
    phone: z.string(),
  }),
  people: z.array(person),
  clients: z.array(
    z.object({
      code: z.string(),
      name: z.string(),
      systemId: z.string(),
      address: z.string(),
      programme: z.string(),
      agencyName: z.string(),
      agencyPhone: z.string(),
      user: z.object({ name: z.string(), email: z.string() }),
      contacts: z.array(
        z.object({
          name: z.string(),
          email: z.string(),
          getsAlerts: z.boolean(),
          getsCertificates: z.boolean(),
        }),
      ),
      points: z.array(
        z.object({
          code: z.string(),
          name: z.string(),
          kind: pointKind,
          typicalMgPerL: z.partialRecord(analyteCode, z.number()),
        }),
      ),
    }),
  ),
  instruments: z.array(
    z.object({
      name: z.string(),
      kind: z.string(),
      serial: z.string(),
      location: z.string(),
      bandwidthNm: z.string(),
    }),
  ),
})
export type DemoData = z.infer<typeof demoData>

export const readDemoData = (): DemoData => demoData.parse(readFixture('demo/laboratory.json'))
