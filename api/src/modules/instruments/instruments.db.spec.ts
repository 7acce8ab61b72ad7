import {
  addInstrument,
  getInstrument,
  listInstruments,
  recordCheck,
  returnInstrument,
  takeInstrumentOut,
} from '@weirlight/shared/contracts'
import { beforeEach, describe, expect, it } from 'vitest'
import type { Agent } from '../../testing/agent.js'
import { daysFromToday } from '../../testing/builders/bench.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { InstrumentsModule } from './index.js'

const at = useTestApp({ imports: [InstrumentsModule] })
let agent: Agent
const reason = 'for this test'
const day = (days: number) => daysFromToday(at().database, days)

beforeEach(async () => {
  agent = await at().as(await aUser(at().database.db, { name: 'Tess Tech' }))
})

describe('an instrument', () => {
  const check = {
    kind: 'wavelength' as const,
    reference: 'holmium oxide',
    nominal: '536.4',
    tolerance: '0.1',
    unit: 'nm' as const,
    note: '',
  }
  const anInstrumentOfOurs = () =>
    agent.call(addInstrument, {
      body: { name: 'Spectro', kind: 'double beam', serial: 'S1', location: 'Bench', bandwidthNm: '2' },
    })

  it('is usable once a check is in date, judged in decimal numbers as typed', async () => {
    const instrument = await anInstrumentOfOurs()
    expect(instrument).toMatchObject({ usable: false, nextCheckDueOn: null, state: 'in-use' })
    const params = { id: instrument.id }
    // 536.5 - 536.4 is more than 0.1 in binary and exactly 0.1 in decimal
    const passed = await agent.call(recordCheck, {
      params,
      body: { ...check, found: '536.5', nextDueOn: day(90) },
    })
    expect(passed).toMatchObject({ usable: true, state: 'in-use', nextCheckDueOn: day(90) })
    expect(passed.checks[0]).toMatchObject({ passed: true, found: '536.5', checkedBy: { name: 'Tess Tech' } })
    const sooner = await agent.call(recordCheck, {
      params,
      body: {
        ...check,
        kind: 'baseline',
        nominal: '0',
        found: '0.001',
        tolerance: '0.002',
        unit: 'A',
        nextDueOn: day(7),
      },
    })
    expect(sooner.nextCheckDueOn).toBe(day(7))
    const past = { ...check, found: '536.5', tolerance: '-1', nextDueOn: day(90) }
    expect((await agent.refused(recordCheck, { params, body: past })).errors?.[0]?.path).toBe('tolerance')
  })

  it('that fails a check is out of use at once, and comes back only after a passed one of that kind', async () => {
    const { id } = await anInstrumentOfOurs()
    const params = { id }
    const failed = await agent.call(recordCheck, {
      params,
      body: { ...check, found: '536.6', nextDueOn: day(90) },
    })
    expect(failed).toMatchObject({ state: 'out-of-use', usable: false })
    expect(failed.checks[0]?.passed).toBe(false)
    const back = { version: failed.version, reason }
    expect((await agent.refused(returnInstrument, { params, body: back })).code).toBe('not-allowed-now')
    const other = {
      ...check,
      kind: 'photometric' as const,
      nominal: '0.500',
      found: '0.501',
      tolerance: '0.005',
      unit: 'A' as const,
      nextDueOn: day(90),
    }
    await agent.call(recordCheck, { params, body: other })
    expect((await agent.refused(returnInstrument, { params, body: back })).detail).toContain('same kind')
    await agent.call(recordCheck, { params, body: { ...check, found: '536.4', nextDueOn: day(90) } })
    const sent = await Promise.all([1, 2].map(() => agent.send(returnInstrument, { params, body: back })))
    oneWins(sent)
    expect(await agent.call(getInstrument, { params })).toMatchObject({ state: 'in-use', usable: true })
  })

  it('taken out by hand needs a check since then', async () => {
    const { id } = await anInstrumentOfOurs()
    const params = { id }
    const checked = await agent.call(recordCheck, {
      params,
      body: { ...check, found: '536.4', nextDueOn: day(90) },
    })
    const out = { version: checked.version, reason: 'lamp flickers' }
    const sent = await Promise.all([1, 2].map(() => agent.send(takeInstrumentOut, { params, body: out })))
    oneWins(sent)
    const { version } = await agent.call(getInstrument, { params })
    const back = { version, reason: 'new lamp' }
    expect((await agent.refused(returnInstrument, { params, body: back })).detail).toContain(
      'No check has passed',
    )
    await agent.call(recordCheck, { params, body: { ...check, found: '536.4', nextDueOn: day(90) } })
    expect((await agent.call(returnInstrument, { params, body: back })).state).toBe('in-use')
    expect((await agent.call(listInstruments, {})).items.find((one) => one.id === id)?.usable).toBe(true)
  })
})
