import {
  getCalibration,
  saveCalibration,
  signCalibration,
  submitCalibration,
} from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import {
  aLot,
  anInstrument,
  aSigner,
  authorise,
  daysFromToday,
  PASSPHRASE,
} from '../../testing/builders/bench.builders.js'
import {
  aCalibrationInForce,
  aDraftCalibration,
  aSubmittedCalibration,
} from '../../testing/builders/calibrations.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { useTestApp } from '../../testing/test-app.js'
import { CalibrationsModule } from './calibrations.module.js'
import { changed } from './calibrations.test-support.js'
import { CalibrationsService } from './index.js'

// Expected values are constructed where nothing else is said.
const at = useTestApp({ imports: [CalibrationsModule] })
const database = () => at().database

describe('signing', () => {
  it('puts it in force until its method’s age, signed over exactly what was shown', async () => {
    const signer = await aSigner(database(), { name: 'Tomas Quell' })
    const submitted = await aSubmittedCalibration(at())
    const qa = await at().as(signer)
    const signed = await qa.call(signCalibration, {
      params: { id: submitted.id },
      body: { version: submitted.version, passphrase: PASSPHRASE },
    })
    expect(signed.state).toBe('in-force')
    expect(signed.signatures).toHaveLength(1)
    expect(signed.signatures[0]).toMatchObject({
      meaning: 'accepted for use',
      printedName: 'Tomas Quell',
      role: 'QA manager',
      stands: true,
    })
    // 30 days: fixtures/reference/methods/fe-phenanthroline.json, common practice
    const days = (Date.parse(signed.validUntil ?? '') - Date.parse(signed.validFrom ?? '')) / 86_400_000
    expect(days).toBeCloseTo(30, 5)
  })

  it('ends with the first lot that expires, at the end of that day in the laboratory', async () => {
    const reagent = await aLot(database(), { kind: 'reagent', expiresOn: daysFromToday(database(), 3) })
    const signed = await aCalibrationInForce(at(), { reagentLotIds: [reagent.id] })
    const day = daysFromToday(database(), 3)
    const ends = new Date(signed.validUntil ?? '')
    const shown = new Intl.DateTimeFormat('en-CA', {
      timeZone: 'America/New_York',
      dateStyle: 'short',
    }).format(new Date(ends.getTime() - 1000))
    expect(shown).toBe(day)
    expect(ends.getUTCMinutes()).toBe(0)
  })

  it('a signature no longer stands when what it covers is changed behind the application’s back', async () => {
    const signed = await aCalibrationInForce(at())
    await database().owner.transaction(SYSTEM, 'test.tamper', 'test', (trx) =>
      trx.updateTable('calibrations').set({ note: 'changed' }).where('id', '=', signed.id).execute(),
    )
    const view = await at().get(CalibrationsService).get(signed.id)
    expect(view.signatures[0]?.stands).toBe(false)
  })

  it('is not for whoever prepared it or read a standard, nor without authorisation, nor with a wrong passphrase', async () => {
    const signer = await aSigner(database())
    const draft = await aDraftCalibration(at())
    // the signer lends a hand with one reading: prepared by two people now
    const qa = await at().as(signer)
    await qa.call(saveCalibration, {
      params: { id: draft.id },
      body: changed(draft, 3, ['0.1970', '0.1968']),
    })
    const preparer = await at().as({ userId: draft.preparedBy.id })
    await authorise(database(), signer, { methodCode: 'fe-phenanthroline', activity: 'read' })
    const submitted = await preparer.call(submitCalibration, {
      params: { id: draft.id },
      body: { version: 2 },
    })
    const input = (passphrase: string) => ({
      params: { id: draft.id },
      body: { version: submitted.version, passphrase },
    })
    expect((await qa.refused(signCalibration, input(PASSPHRASE))).code).toBe('own-work')
    expect((await preparer.refused(signCalibration, input(PASSPHRASE))).code).toBe('forbidden')

    const other = await at().as(await aSigner(database()))
    const wrong = await other.refused(signCalibration, input('not the passphrase at all'))
    expect(wrong).toMatchObject({ code: 'wrong-passphrase', errors: [{ path: 'passphrase' }] })

    const stranger = await aSigner(database(), { methodCode: 'mn-persulfate' })
    const unauthorised = await (await at().as(stranger)).refused(signCalibration, input(PASSPHRASE))
    expect(unauthorised).toMatchObject({
      code: 'not-allowed-now',
      detail: expect.stringContaining('not authorised') as string,
    })
    expect((await other.call(getCalibration, { params: { id: draft.id } })).state).toBe('submitted')
  })

  it('replaces the one in force before, in the same moment; another cell keeps its own', async () => {
    const instrument = await anInstrument(database())
    const first = await aCalibrationInForce(at(), { instrumentId: instrument.id })
    const second = await aCalibrationInForce(at(), { instrumentId: instrument.id, cellPathCm: '1.00' })
    const [before, after] = await Promise.all(
      [first, second].map(({ id }) => at().get(CalibrationsService).get(id)),
    )
    expect(before).toMatchObject({ state: 'replaced', replacedBy: { number: second.number } })
    expect(after?.state).toBe('in-force')
  })

  it('two managers sign the same calibration at once: one wins', async () => {
    const [a, b] = await Promise.all([aSigner(database()), aSigner(database())])
    const submitted = await aSubmittedCalibration(at())
    const input = {
      params: { id: submitted.id },
      body: { version: submitted.version, passphrase: PASSPHRASE },
    }
    const [first, second] = await Promise.all([at().as(a), at().as(b)])
    const sent = await Promise.all([first.send(signCalibration, input), second.send(signCalibration, input)])
    oneWins(sent)
    const view = await first.call(getCalibration, { params: { id: submitted.id } })
    expect(view.signatures).toHaveLength(1)
  })

  it('two calibrations of one place signed at once: both are signed, one is in force', async () => {
    const instrument = await anInstrument(database())
    const [a, b] = await Promise.all([aSigner(database()), aSigner(database())])
    const one = await aSubmittedCalibration(at(), { instrumentId: instrument.id })
    const two = await aSubmittedCalibration(at(), { instrumentId: instrument.id })
    const [first, second] = await Promise.all([at().as(a), at().as(b)])
    const sent = await Promise.all([
      first.send(signCalibration, {
        params: { id: one.id },
        body: { version: one.version, passphrase: PASSPHRASE },
      }),
      second.send(signCalibration, {
        params: { id: two.id },
        body: { version: two.version, passphrase: PASSPHRASE },
      }),
    ])
    expect(sent.map(({ status }) => status)).toEqual([200, 200])
    const states = await Promise.all(
      [one, two].map(async ({ id }) => (await at().get(CalibrationsService).get(id)).state),
    )
    expect(states.sort()).toEqual(['in-force', 'replaced'])
  })

  it('is refused once a lot has expired since the submission', async () => {
    const reagent = await aLot(database(), { kind: 'reagent' })
    const submitted = await aSubmittedCalibration(at(), { reagentLotIds: [reagent.id] })
    await database().db.transaction(SYSTEM, 'material.withdraw', 'test', (trx) =>
      trx.updateTable('materialLots').set({ state: 'withdrawn' }).where('id', '=', reagent.id).execute(),
    )
    const qa = await at().as(await aSigner(database()))
    const refused = await qa.refused(signCalibration, {
      params: { id: submitted.id },
      body: { version: submitted.version, passphrase: PASSPHRASE },
    })
    expect(refused).toMatchObject({
      code: 'not-allowed-now',
      detail: expect.stringContaining(reagent.number) as string,
    })
  })

  it('is refused when the stored fit is not what the readings give', async () => {
    const submitted = await aSubmittedCalibration(at())
    await database().owner.transaction(SYSTEM, 'test.tamper', 'test', (trx) =>
      trx
        .updateTable('calibrations')
        .set({
          stored: JSON.stringify({ ...submitted.stored, slope: (submitted.stored?.slope ?? 0) + 1e-15 }),
        })
        .where('id', '=', submitted.id)
        .execute(),
    )
    const qa = await at().as(await aSigner(database()))
    const refused = await qa.refused(signCalibration, {
      params: { id: submitted.id },
      body: { version: submitted.version, passphrase: PASSPHRASE },
    })
    expect(refused.detail).toContain('Computed again')
  })
})
