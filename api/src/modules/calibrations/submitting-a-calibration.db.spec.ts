import { predictConcentration, type CalibrationFit } from '@weirlight/shared/assay'
import {
  getCalibration,
  saveCalibration,
  signCalibration,
  submitCalibration,
} from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import {
  aLot,
  anAnalyst,
  anInstrument,
  aSigner,
  daysFromToday,
  PASSPHRASE,
} from '../../testing/builders/bench.builders.js'
import {
  aDraftCalibration,
  aSubmittedCalibration,
  ironStandards,
} from '../../testing/builders/calibrations.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { CalibrationsModule } from './calibrations.module.js'
import { asForm } from './calibrations.test-support.js'
import { DecisionsService } from './index.js'

// Expected values are constructed where nothing else is said.
const at = useTestApp({ imports: [CalibrationsModule] })
const database = () => at().database

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
    oneWins(sent)
    const view = await agent.call(getCalibration, { params: { id: draft.id } })
    const late = await agent.refused(saveCalibration, { params: { id: draft.id }, body: asForm(view) })
    expect(late).toMatchObject({
      code: 'not-allowed-now',
      detail: expect.stringContaining('is submitted') as string,
    })
  })

  it('stores the fit so that it gives the same doubles, bit for bit', async () => {
    const analyst = await anAnalyst(database())
    const draft = await aDraftCalibration(at(), { analyst })
    const live = draft.stored
    const submitted = await at().get(DecisionsService).submit(analyst, draft.id, { version: draft.version })
    expect(submitted.stored).toEqual(JSON.parse(JSON.stringify(live)))
    const absorbances = [0.1234, 0.1236]
    const [fresh, kept] = [live, submitted.stored].map((one) =>
      predictConcentration(one?.fit as unknown as CalibrationFit, { absorbances }),
    )
    expect(kept).toEqual(fresh)
  })
})
