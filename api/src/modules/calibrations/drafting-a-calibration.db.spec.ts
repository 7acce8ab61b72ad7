import { saveCalibration, startCalibration } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { aLot, anAnalyst } from '../../testing/builders/bench.builders.js'
import { aCalibrationForm, aDraftCalibration } from '../../testing/builders/calibrations.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { useTestApp } from '../../testing/test-app.js'
import { CalibrationsModule } from './calibrations.module.js'
import { changed } from './calibrations.test-support.js'

// Expected values are constructed where nothing else is said.
const at = useTestApp({ imports: [CalibrationsModule] })
const database = () => at().database

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
    const lost = oneWins(sent)
    expect(lost.code).toBe('stale')
    expect(['Ada Weir', 'Ben Sluice']).toContain(lost.conflict?.changedBy)
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
