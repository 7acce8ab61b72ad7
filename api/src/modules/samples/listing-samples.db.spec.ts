import { getSample, listSamples } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { aPoint, aReceivedSample } from '../../testing/builders/samples.builders.js'
import { useTestApp } from '../../testing/test-app.js'
import { LaboratoryModule } from '../laboratory/index.js'
import { SamplesModule } from './index.js'
import { technician } from './samples.test-support.js'

const at = useTestApp({ imports: [LaboratoryModule, SamplesModule] })

describe('the register', () => {
  it('pages by key, newest first, and filters', async () => {
    const agent = await technician(at())
    const point = await aPoint(at().database)
    const numbers: string[] = []
    for (let n = 0; n < 5; n += 1) {
      const sample = await aReceivedSample(at(), { clientId: point.clientId, pointId: point.id })
      numbers.unshift(sample.number)
    }
    const first = await agent.call(listSamples, { query: { clientId: point.clientId, limit: 2 } })
    expect(first.items.map(({ number }) => number)).toEqual(numbers.slice(0, 2))
    const second = await agent.call(listSamples, {
      query: { clientId: point.clientId, limit: 2, after: first.next ?? '' },
    })
    expect(second.items.map(({ number }) => number)).toEqual(numbers.slice(2, 4))
    const byNumber = await agent.call(listSamples, { query: { number: numbers[0] ?? '' } })
    expect(byNumber.items.map(({ number }) => number)).toEqual([numbers[0]])
    // the end of a number, and its beginning in small letters, find it as well
    for (const number of [numbers[0]?.slice(-5) ?? '', numbers[0]?.toLowerCase() ?? '']) {
      const found = await agent.call(listSamples, { query: { number, clientId: point.clientId } })
      expect(found.items.map((item) => item.number)).toEqual([numbers[0]])
    }
    const begun = await agent.call(listSamples, { query: { number: 's-', clientId: point.clientId } })
    expect(begun.items.map(({ number }) => number)).toEqual(numbers)
    expect((await agent.refused(listSamples, { query: { after: 'nonsense' } })).code).toBe('invalid-input')
    expect((await agent.refused(getSample, { params: { id: '999999' } })).code).toBe('not-found')
  })
})
