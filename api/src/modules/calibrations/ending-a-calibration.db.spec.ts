import {
  copyCalibration,
  getCalibration,
  invalidateCalibration,
  sendBackCalibration,
  signCalibration,
} from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import { JobsService } from '../../platform/index.js'
import { aSigner, PASSPHRASE } from '../../testing/builders/bench.builders.js'
import { aCalibrationInForce, aSubmittedCalibration } from '../../testing/builders/calibrations.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { useTestApp } from '../../testing/test-app.js'
import { CalibrationsModule } from './calibrations.module.js'
import { CalibrationsService, expireCalibrations } from './index.js'

// Expected values are constructed where nothing else is said.
const at = useTestApp({ imports: [CalibrationsModule] })
const database = () => at().database

describe('other ends', () => {
  it('sent back with its reason; the technician starts over from a copy without readings', async () => {
    const submitted = await aSubmittedCalibration(at())
    const qa = await at().as(await aSigner(database()))
    const back = await qa.call(sendBackCalibration, {
      params: { id: submitted.id },
      body: { version: submitted.version, reason: 'Standard 4 bends away' },
    })
    expect(back).toMatchObject({ state: 'rejected', returnedReason: 'Standard 4 bends away' })
    const agent = await at().as({ userId: submitted.preparedBy.id })
    const draftId = '0b0a4f2e-6c1e-4f3a-9d55-0d1f3c9b7a10'
    const copy = await agent.call(copyCalibration, { params: { id: submitted.id }, body: { draftId } })
    const again = await agent.call(copyCalibration, { params: { id: submitted.id }, body: { draftId } })
    expect(again.number).toBe(copy.number)
    expect(copy.state).toBe('draft')
    expect(copy.standards.map(({ concentration }) => concentration)).toEqual(
      submitted.standards.map(({ concentration }) => concentration),
    )
    expect(copy.standards.flatMap(({ readings }) => readings)).toEqual([])
    expect(copy.reagentLots).toEqual(submitted.reagentLots)
    const late = await qa.refused(signCalibration, {
      params: { id: submitted.id },
      body: { version: back.version, passphrase: PASSPHRASE },
    })
    expect(late).toMatchObject({
      code: 'not-allowed-now',
      detail: expect.stringContaining('is sent back') as string,
    })
  })

  it('signed and sent back at once: one wins', async () => {
    const [a, b] = await Promise.all([aSigner(database()), aSigner(database())])
    const submitted = await aSubmittedCalibration(at())
    const [first, second] = await Promise.all([at().as(a), at().as(b)])
    const { id, version } = submitted
    const sent = await Promise.all([
      first.send(signCalibration, { params: { id }, body: { version, passphrase: PASSPHRASE } }),
      second.send(sendBackCalibration, { params: { id }, body: { version, reason: 'Two at once' } }),
    ])
    oneWins(sent)
  })

  it('taken out of force carries no results any more', async () => {
    const signed = await aCalibrationInForce(at())
    const calibrations = at().get(CalibrationsService)
    expect((await calibrations.getInForce(database().db.read, signed.id)).row.number).toBe(signed.number)
    const qa = await at().as(await aSigner(database()))
    const input = { params: { id: signed.id }, body: { version: signed.version, reason: 'Lamp was failing' } }
    const sent = await Promise.all([
      qa.send(invalidateCalibration, input),
      qa.send(invalidateCalibration, input),
    ])
    oneWins(sent)
    const view = await qa.call(getCalibration, { params: { id: signed.id } })
    expect(view).toMatchObject({ state: 'invalidated', endedReason: 'Lamp was failing', batches: [] })
    await expect(calibrations.getInForce(database().db.read, signed.id)).rejects.toThrow('is invalidated')
    await expect(calibrations.requireUsable(database().db.read, signed.id)).rejects.toThrow('is invalidated')
  })

  it('over is over, before and after the hourly job writes it down', async () => {
    const signed = await aCalibrationInForce(at())
    await database().owner.transaction(SYSTEM, 'test.age', 'test', (trx) =>
      trx
        .updateTable('calibrations')
        .set({ validUntil: new Date(database().clock.now().getTime() - 60_000) })
        .where('id', '=', signed.id)
        .execute(),
    )
    const calibrations = at().get(CalibrationsService)
    await expect(calibrations.getInForce(database().db.read, signed.id)).rejects.toMatchObject({
      code: 'not-allowed-now',
      detail: expect.stringContaining('was valid until') as string,
    })
    const jobs = at().get(JobsService)
    await Promise.all([jobs.runNow(expireCalibrations, {}), jobs.runNow(expireCalibrations, {})])
    const view = await calibrations.get(signed.id)
    expect(view.state).toBe('expired')
    expect(view.version).toBe(signed.version + 1)
    const [entry] = await database()
      .db.read.selectFrom('history')
      .select(['actorName', 'actorRole', 'action'])
      .where('thing', '=', 'calibrations')
      .where('thingId', '=', signed.id)
      .orderBy('id', 'desc')
      .limit(1)
      .execute()
    expect(entry).toEqual({ actorName: 'Weirlight', actorRole: 'system', action: 'calibration.expire' })
  })
})
