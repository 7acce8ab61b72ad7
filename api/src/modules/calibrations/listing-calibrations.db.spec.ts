import { listCalibrations, startCalibration } from '@weirlight/shared/contracts'
import { expect, it } from 'vitest'
import {
  aCalibrationForm,
  aCalibrationInForce,
  aDraftCalibration,
} from '../../testing/builders/calibrations.builders.js'
import { methodId } from '../../testing/builders/reference.builders.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { CalibrationsModule } from './calibrations.module.js'

const at = useTestApp({ imports: [CalibrationsModule] })
const database = () => at().database

it('the list pages and filters, for those who may read it', async () => {
  for (let n = 0; n < 3; n += 1) await aDraftCalibration(at())
  await aCalibrationInForce(at())
  const auditor = await at().as(await aUser(database().db, { role: 'auditor' }))
  const all = await auditor.call(listCalibrations, { query: { limit: 3 } })
  expect(all.items).toHaveLength(3)
  const next = await auditor.call(listCalibrations, { query: { limit: 3, after: all.next ?? '' } })
  expect(Number(next.items[0]?.id)).toBeLessThan(Number(all.items[2]?.id))
  const inForce = await auditor.call(listCalibrations, {
    query: { state: 'in-force', methodId: await methodId(database(), 'fe-phenanthroline') },
  })
  expect(inForce.items).toHaveLength(1)
  expect(inForce.items.every(({ state, slope }) => state === 'in-force' && slope !== null)).toBe(true)
  const client = await at().as(await aUser(database().db, { role: 'client' }))
  expect((await client.refused(listCalibrations, { query: {} })).code).toBe('forbidden')
  const draft = await aCalibrationForm(at())
  expect((await auditor.refused(startCalibration, { body: draft })).code).toBe('forbidden')
})
