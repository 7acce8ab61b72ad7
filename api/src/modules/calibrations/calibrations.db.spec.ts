import {
  copyCalibration,
  getCalibration,
  invalidateCalibration,
  listCalibrations,
  saveCalibration,
  sendBackCalibration,
  signCalibration,
  startCalibration,
  submitCalibration,
  type BodyInput,
  type CalibrationView,
} from '@weirlight/shared/contracts'
import { predictConcentration, type CalibrationFit } from '@weirlight/shared/assay'
import { describe, expect, it } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import { JobsService } from '../../platform/index.js'
import {
  aLot,
  anAnalyst,
  anInstrument,
  aSigner,
  daysFromToday,
  PASSPHRASE,
} from '../../testing/builders/bench.builders.js'
import {
  aCalibrationForm,
  aCalibrationInForce,
  aDraftCalibration,
  aSubmittedCalibration,
  ironStandards,
} from '../../testing/builders/calibrations.builders.js'
import { methodId } from '../../testing/builders/reference.builders.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { CalibrationsService, DecisionsService, expireCalibrations } from './index.js'
import { CalibrationsModule } from './calibrations.module.js'

// Expected values are constructed where nothing else is said.
const at = useTestApp({ imports: [CalibrationsModule] })
const database = () => at().database
type SaveBody = BodyInput<typeof saveCalibration>

/** What the workbench sends for what it shows. */
function asForm(view: CalibrationView): SaveBody {
  return {
    version: view.version,
    instrumentId: view.instrumentId,
    cellPathCm: view.cellPathCm,
    model: view.model,
    weighting: view.weighting,
    stockLotId: view.stockLotId,
    reagentLotIds: view.reagentLots.map(({ id }) => id),
    colourStartedAt: view.colourStartedAt,
    temperatureC: view.temperatureC,
    note: view.note,
    standards: view.standards.map(({ role, concentration, lotId, leftOutReason, readings }) => ({
      role,
      concentration,
      lotId,
      leftOutReason,
      readings: readings.length === 0 ? [''] : readings.map(({ absorbance }) => absorbance),
    })),
  }
}
const changed = (view: CalibrationView, standard: number, readings: string[]): SaveBody => ({
  ...asForm(view),
  standards: asForm(view).standards.map((one, index) => (index === standard ? { ...one, readings } : one)),
})

describe('a draft', () => {
  it('is numbered, keeps what was typed, and shows its curve as the engine has it', async () => {
    const agent = await at().as(await anAnalyst(database()))
    const draft = await agent.call(startCalibration, {
      body: await aCalibrationForm(at(), { cellPathCm: '1.0' }),
    })
    expect(draft).toMatchObject({
      state: 'draft',
      analyte: 'Fe',
      cellPathCm: '1',
      wavelengthNm: 510,
      criteriaFailed: 0,
    })
    expect(draft.number).toMatch(/^K-\d\d-\d{4}$/)
    expect(draft.standards[1]).toMatchObject({ concentration: '0.05', position: 2 })
    expect(draft.standards[2]?.readings.map(({ absorbance }) => absorbance)).toEqual(['0.0986', '0.0991'])
    expect(draft.stored?.slope).toBeCloseTo(0.197, 3)
    expect(draft.criteria.find(({ code }) => code === 'second-source')?.outcome).toBe('pass')
  })

  it('sent twice, also at the same moment, is one calibration', async () => {
    const agent = await at().as(await anAnalyst(database()))
    const form = await aCalibrationForm(at())
    const [a, b] = await Promise.all([
      agent.call(startCalibration, { body: form }),
      agent.call(startCalibration, { body: form }),
    ])
    expect(a.number).toBe(b.number)
    expect((await agent.call(startCalibration, { body: form })).standards).toHaveLength(8)
  })

  it('keeps every reading: a changed cell supersedes, an emptied cell too', async () => {
    const analyst = await anAnalyst(database(), { name: 'Ines Prism' })
    const agent = await at().as(analyst)
    const draft = await aDraftCalibration(at(), { analyst })
    const once = await agent.call(saveCalibration, {
      params: { id: draft.id },
      body: changed(draft, 3, ['0.1970', '0.1968']),
    })
    const twice = await agent.call(saveCalibration, {
      params: { id: draft.id },
      body: { ...changed(once, 3, ['0.1970', '']), reason: 'Bubble in the cell' },
    })
    expect(twice.standards[3]?.readings.map(({ absorbance, corrected }) => [absorbance, corrected])).toEqual([
      ['0.1970', true],
    ])
    expect(
      twice.corrections.map(({ what, from, to, by, reason }) => ({ what, from, to, by, reason })),
    ).toEqual([
      {
        what: 'Standard 4, 1.00 mg/L, reading 1',
        from: '0.1973',
        to: '0.1970',
        by: 'Ines Prism',
        reason: 'corrected in the draft',
      },
      {
        what: 'Standard 4, 1.00 mg/L, reading 2',
        from: '0.1968',
        to: 'empty',
        by: 'Ines Prism',
        reason: 'Bubble in the cell',
      },
    ])
    const { n } = await database()
      .db.read.selectFrom('calibrationReadings')
      .select((eb) => eb.fn.countAll<string>().as('n'))
      .where('calibrationId', '=', draft.id)
      .executeTakeFirstOrThrow()
    expect(Number(n)).toBe(16 + 2)
  })

  it('two people save at once: one wins, the other is told who was faster', async () => {
    const [a, b] = await Promise.all([
      anAnalyst(database(), { name: 'Ada Weir' }),
      anAnalyst(database(), { name: 'Ben Sluice' }),
    ])
    const draft = await aDraftCalibration(at(), { analyst: a })
    const [first, second] = await Promise.all([at().as(a), at().as(b)])
    const input = (text: string) => ({ params: { id: draft.id }, body: changed(draft, 3, [text, '0.1968']) })
    const sent = await Promise.all([
      first.send(saveCalibration, input('0.1970')),
      second.send(saveCalibration, input('0.1971')),
    ])
    expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
    const lost = sent.find(({ status }) => status === 409)?.json as {
      code: string
      conflict: { changedBy: string }
    }
    expect(lost.code).toBe('stale')
    expect(['Ada Weir', 'Ben Sluice']).toContain(lost.conflict.changedBy)
  })

  it('names every entry that cannot be, by its path', async () => {
    const agent = await at().as(await anAnalyst(database()))
    const copper = await aLot(database(), { analyte: 'Cu' })
    const reagent = await aLot(database(), { kind: 'reagent' })
    const form = await aCalibrationForm(at(), {
      stockLotId: reagent.id,
      reagentLotIds: [copper.id],
      instrumentId: '999999',
    })
    const standards = form.standards.map((one, index) => (index === 1 ? { ...one, lotId: copper.id } : one))
    const problem = await agent.refused(startCalibration, { body: { ...form, standards } })
    expect(problem.errors).toEqual([
      { path: 'stockLotId', message: `${reagent.number} is not a standard.` },
      { path: 'reagentLotIds.0', message: `${copper.number} is not a reagent.` },
      { path: 'standards.1.lotId', message: `${copper.number} does not hold Fe.` },
      { path: 'instrumentId', message: 'There is no such instrument.' },
    ])
    const absurd = await agent.refused(startCalibration, {
      body: {
        ...form,
        standards: [
          { role: 'standard', concentration: '1,0', lotId: null, readings: ['39.4', 'x'], leftOutReason: '' },
        ],
      },
    })
    expect(absurd.errors?.map(({ path, message }) => `${path}: ${message}`)).toEqual([
      'standards.0.concentration: Use a decimal point: 1.0.',
      'standards.0.readings.0: The absorbance must lie between -0.5 and 4.',
      'standards.0.readings.1: “x” is not a number.',
    ])
  })
})

describe('submission', () => {
  it('says everything that stands in the way at once', async () => {
    const outsider = await aUser(database().db)
    const expired = await aLot(database(), { kind: 'reagent', expiresOn: daysFromToday(database(), -2) })
    const late = await anInstrument(database(), { checkDueOn: daysFromToday(database(), -2) })
    const standards = (await ironStandards(at())).slice(2)
    const draft = await aDraftCalibration(at(), {
      analyst: outsider,
      instrumentId: late.id,
      reagentLotIds: [expired.id],
      standards: standards
        .map((one, index) => (index === 1 ? { ...one, readings: [one.readings[0] ?? '', ''] } : one))
        .slice(0, 4),
    })
    const agent = await at().as(outsider)
    const problem = await agent.refused(submitCalibration, {
      params: { id: draft.id },
      body: { version: draft.version },
    })
    expect(problem.code).toBe('not-allowed-now')
    const paths = problem.errors?.map(({ path }) => path)
    expect(paths).toEqual([
      '',
      'instrumentId',
      'reagentLotIds.0',
      'standards.1.readings',
      'standards',
      'note',
    ])
    expect(problem.detail).toContain('not authorised')
    expect(problem.detail).toContain('Standard 2, 1.00 mg/L has 1 of 2 readings.')
    expect(problem.detail).toContain('At least 5 standards above zero are needed; there are 4.')
    expect(problem.detail).toContain('Second source')
    expect((await agent.call(getCalibration, { params: { id: draft.id } })).state).toBe('draft')
  })

  it('a failed criterion asks for a note, and a justification from the signer', async () => {
    const [analyst, signer] = await Promise.all([anAnalyst(database()), aSigner(database())])
    const standards = (await ironStandards(at())).slice(0, -1)
    const draft = await aDraftCalibration(at(), { analyst, standards })
    const agent = await at().as(analyst)
    const refused = await agent.refused(submitCalibration, {
      params: { id: draft.id },
      body: { version: draft.version },
    })
    expect(refused.errors?.map(({ path }) => path)).toEqual(['note'])
    const noted = await agent.call(saveCalibration, {
      params: { id: draft.id },
      body: { ...asForm(draft), note: 'Second source ordered, arrives on Monday' },
    })
    const submitted = await agent.call(submitCalibration, {
      params: { id: draft.id },
      body: { version: noted.version },
    })
    expect(submitted).toMatchObject({ state: 'submitted', criteriaFailed: 1 })
    const qa = await at().as(signer)
    const bare = { version: submitted.version, passphrase: PASSPHRASE }
    const silent = await qa.refused(signCalibration, { params: { id: draft.id }, body: bare })
    expect(silent.errors?.[0]?.path).toBe('justification')
    const signed = await qa.call(signCalibration, {
      params: { id: draft.id },
      body: { ...bare, justification: 'Control sample agrees; second source within the week' },
    })
    expect(signed).toMatchObject({
      state: 'in-force',
      justification: expect.stringContaining('within the week') as string,
    })
  })

  it('missing readings of a standard that is left out with its reason do not stop it', async () => {
    const standards = (await ironStandards(at())).map((one, index) =>
      index === 3 ? { ...one, readings: ['0.1973', ''], leftOutReason: 'Flask not filled to the mark' } : one,
    )
    const submitted = await aSubmittedCalibration(at(), { standards })
    expect(submitted.state).toBe('submitted')
    expect(submitted.standards[3]?.leftOutReason).toBe('Flask not filled to the mark')
  })

  it('by two at once is one submission, and a submitted calibration is not saved any more', async () => {
    const analyst = await anAnalyst(database())
    const draft = await aDraftCalibration(at(), { analyst })
    const agent = await at().as(analyst)
    const input = { params: { id: draft.id }, body: { version: draft.version } }
    const sent = await Promise.all([
      agent.send(submitCalibration, input),
      agent.send(submitCalibration, input),
    ])
    expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
    const view = await agent.call(getCalibration, { params: { id: draft.id } })
    const late = await agent.refused(saveCalibration, { params: { id: draft.id }, body: asForm(view) })
    expect(late).toMatchObject({
      code: 'not-allowed-now',
      detail: expect.stringContaining('is submitted') as string,
    })
  })

  it('stores the fit so that it gives the same doubles, bit for bit', async () => {
    const draft = await aDraftCalibration(at())
    const live = draft.stored
    const submitted = await at()
      .get(DecisionsService)
      .submit(
        { userId: draft.preparedBy.id, name: draft.preparedBy.name, role: 'technician', clientId: null },
        draft.id,
        {
          version: draft.version,
        },
      )
    expect(submitted.stored).toEqual(JSON.parse(JSON.stringify(live)))
    const absorbances = [0.1234, 0.1236]
    const [fresh, kept] = [live, submitted.stored].map((one) =>
      predictConcentration(one?.fit as unknown as CalibrationFit, { absorbances }),
    )
    expect(kept).toEqual(fresh)
  })
})

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
    await database().db.transaction(SYSTEM, 'authorisation.record', null, async (trx) => {
      await trx
        .insertInto('authorisations')
        .values({
          userId: signer.userId,
          methodId: draft.methodId,
          activity: 'read',
          validFrom: '2020-01-01',
          validUntil: '2099-01-01',
          evidence: 'test',
        })
        .execute()
    })
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
    expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
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
    expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
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
    expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
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

  it('the list pages and filters, for those who may read it', async () => {
    const auditor = await at().as(await aUser(database().db, { role: 'auditor' }))
    const all = await auditor.call(listCalibrations, { query: { limit: 3 } })
    expect(all.items).toHaveLength(3)
    const next = await auditor.call(listCalibrations, { query: { limit: 3, after: all.next ?? '' } })
    expect(Number(next.items[0]?.id)).toBeLessThan(Number(all.items[2]?.id))
    const inForce = await auditor.call(listCalibrations, {
      query: { state: 'in-force', methodId: await methodId(database(), 'fe-phenanthroline') },
    })
    expect(inForce.items.every(({ state, slope }) => state === 'in-force' && slope !== null)).toBe(true)
    const client = await at().as(await aUser(database().db, { role: 'client' }))
    expect((await client.refused(listCalibrations, { query: {} })).code).toBe('forbidden')
    const draft = await aCalibrationForm(at())
    expect((await auditor.refused(startCalibration, { body: draft })).code).toBe('forbidden')
  })
})
