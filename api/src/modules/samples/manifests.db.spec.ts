import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { applyManifest, getSample, previewManifest, type manifestPreview } from '@weirlight/shared/contracts'
import type { Problem } from '@weirlight/shared/errors'
import { beforeAll, describe, expect, it } from 'vitest'
import type { z } from 'zod'
import { theReference } from '../../testing/builders/reference.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { aUser } from '../../testing/people.js'
import { useTestApp } from '../../testing/test-app.js'
import { SYSTEM } from '../../platform/database/acting.js'
import { SamplesModule } from './index.js'

// The files of fixtures/import are constructed; their clients are those of the demonstration laboratory.
const FILES = fileURLToPath(new URL('../../../../fixtures/import/', import.meta.url))
const at = useTestApp({ imports: [SamplesModule] })

beforeAll(async () => {
  const { programmes } = await theReference(at().database)
  await at().database.db.transaction(SYSTEM, 'client.create', null, async (trx) => {
    for (const [code, name] of [
      ['PH', 'Pellam Hills Water Board'],
      ['DM', 'Dunmarrow District Water'],
      ['TH', 'Thistle Heights Metropolitan District'],
      ['KR', 'Keld River Treatment Company'],
    ] as const) {
      const client = await trx
        .insertInto('clients')
        .values({ code, name, programmeId: programmes['us-drinking-water'] ?? '' })
        .returning('id')
        .executeTakeFirstOrThrow()
      for (const n of [1, 2, 3, 4, 5, 6, 7]) {
        const pointCode = `${code}-0${n}`
        const pointName =
          pointCode === 'DM-04' ? 'Market Square tap' : pointCode === 'PH-05' ? 'Well 5' : `Point ${n}`
        await trx
          .insertInto('samplingPoints')
          .values({ clientId: client.id, code: pointCode, name: pointName, kind: 'tap' })
          .execute()
      }
    }
  })
})

const bench = async () => at().as(await aUser(at().database.db))
const file = (name: string) => ({
  filename: name.split('/').at(-1) ?? '',
  content: readFileSync(`${FILES}${name}`),
})
async function preview(name: string) {
  const agent = await bench()
  const sent = await agent.upload(previewManifest, { file: file(name) })
  expect(sent.status).toBe(200)
  return { agent, shown: sent.json as z.infer<typeof manifestPreview> }
}
const countSamples = async () => {
  const { n } = await at()
    .database.db.fresh.selectFrom('samples')
    .select((eb) => eb.fn.countAll<string>().as('n'))
    .executeTakeFirstOrThrow()
  return Number(n)
}

describe('a manifest', () => {
  it('is shown, keeps its bytes, is received whole, once', async () => {
    const before = await countSamples()
    const { agent, shown } = await preview('ok/manifest-field-round.csv')
    expect(shown).toMatchObject({ good: 4, bad: 0, fileName: 'manifest-field-round.csv' })
    expect(await countSamples()).toBe(before)
    const kept = await at()
      .database.db.read.selectFrom('uploads')
      .select(['bytes', 'sha256'])
      .where('id', '=', shown.uploadId)
      .executeTakeFirstOrThrow()
    expect(kept.bytes.equals(file('ok/manifest-field-round.csv').content)).toBe(true)
    expect(kept.sha256).toBe(shown.sha256)

    // two people press the button at once: one wins
    const other = await bench()
    const input = { params: { id: shown.uploadId } }
    const sent = await Promise.all([agent.send(applyManifest, input), other.send(applyManifest, input)])
    oneWins(sent)
    const { samples } = sent.find(({ status }) => status === 200)?.json as {
      samples: { id: string; number: string }[]
    }
    expect(samples).toHaveLength(4)
    expect(await countSamples()).toBe(before + 4)
    const numbers = samples.map(({ number }) => number)
    expect(numbers).toEqual([...numbers].sort())
    const third = await agent.call(getSample, { params: { id: samples[2]?.id ?? '' } })
    expect(third).toMatchObject({ pointCode: 'DM-04', collectedBy: 'Quill, P.', state: 'received' })
    expect(third.details).toHaveLength(3)

    const again = await agent.refused(applyManifest, input)
    expect(again).toMatchObject({
      code: 'not-allowed-now',
      detail: expect.stringContaining('already') as string,
    })
    const sameFile = await agent.upload(previewManifest, { file: file('ok/manifest-field-round.csv') })
    expect((sameFile.json as Problem).code).toBe('already-exists')
  })

  it('with one bad row receives nothing', async () => {
    const before = await countSamples()
    const { agent, shown } = await preview('not-ok/manifest-bad-values.csv')
    // “Mn total” names one method here: the other one is not in use
    expect(shown.good).toBe(2)
    expect(shown.bad).toBe(10)
    const refused = await agent.refused(applyManifest, { params: { id: shown.uploadId } })
    expect(refused.code).toBe('not-allowed-now')
    expect(await countSamples()).toBe(before)
  })

  it('is checked again when it is received: a point closed meanwhile stops all of it', async () => {
    const before = await countSamples()
    const { agent, shown } = await preview('ok/manifest-semicolons.csv')
    const closed = (isActive: boolean) =>
      at().database.db.transaction(SYSTEM, 'point.change', 'test', (trx) =>
        trx.updateTable('samplingPoints').set({ active: isActive }).where('code', '=', 'KR-02').execute(),
      )
    await closed(false)
    const refused = await agent.refused(applyManifest, { params: { id: shown.uploadId } })
    expect(refused.errors).toEqual([{ path: 'rows.1.pointId', message: 'Row 3: KR-02 is no longer in use.' }])
    expect(await countSamples()).toBe(before)
    await closed(true)
    expect((await agent.call(applyManifest, { params: { id: shown.uploadId } })).samples).toHaveLength(2)
  })

  it.each([
    ['not-ok/manifest-empty.csv', 'upload-unreadable'],
    ['not-ok/manifest-old-format.xls', 'upload-unreadable'],
    ['not-ok/manifest-named-wrongly.xlsx', 'upload-unreadable'],
    ['not-ok/manifest-with-formula.xlsx', 'upload-unreadable'],
  ])('%s is refused: %s', async (name, code) => {
    const sent = await (await bench()).upload(previewManifest, { file: file(name) })
    expect((sent.json as Problem).code).toBe(code)
  })

  it('is not for an auditor, and another kind of upload is no manifest', async () => {
    const auditor = await at().as(await aUser(at().database.db, { role: 'auditor' }))
    const sent = await auditor.upload(previewManifest, { file: file('ok/manifest-field-round.csv') })
    expect((sent.json as Problem).code).toBe('forbidden')
    expect((await (await bench()).refused(applyManifest, { params: { id: '987654' } })).code).toBe(
      'not-found',
    )
  })
})
