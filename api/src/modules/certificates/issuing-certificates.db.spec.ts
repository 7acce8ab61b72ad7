import {
  certificatePdf,
  getCertificate,
  getSample,
  issueCertificate,
  releaseBatch,
  withdrawDetermination,
} from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import { aSigner, PASSPHRASE } from '../../testing/builders/bench.builders.js'
import { aReleasedBatch, aSubmittedBatch, BELOW } from '../../testing/builders/results.builders.js'
import { anAcceptedSample, aPoint } from '../../testing/builders/samples.builders.js'
import { oneWins } from '../../testing/one-wins.js'
import { pdfPages } from '../../testing/pdf-text.js'
import {
  aCertificate,
  certificatesOf,
  manager,
  params,
  render,
  useCertificatesApp,
} from './certificates.test-support.js'

// Absorbances and what they come to are constructed.
const at = useCertificatesApp()

describe('a certificate', () => {
  it('is issued when the last determination of its sample is released, and holds all of them', async () => {
    const point = await aPoint(at().database)
    const sample = await anAcceptedSample(at(), {
      clientId: point.clientId,
      pointId: point.id,
      methodCodes: ['fe-phenanthroline', 'cu-bathocuproine'],
    })
    const idOf = (methodTitle: RegExp) =>
      sample.details.filter((one) => methodTitle.test(one.methodTitle)).map(({ id }) => id)
    await aReleasedBatch(at(), { determinationIds: idOf(/Iron/) })
    expect(await certificatesOf(at(), sample.id)).toEqual([])
    await aReleasedBatch(at(), { metal: 'Cu', determinationIds: idOf(/Copper/), samples: [BELOW] })
    const [certificate, ...more] = await certificatesOf(at(), sample.id)
    expect(more).toEqual([])
    expect(certificate?.number).toMatch(/^C-\d\d-\d{4}$/)
    const view = await (await manager(at())).call(getCertificate, params(certificate?.id ?? ''))
    expect(view.snapshot.results.map(({ determination, verdict }) => [determination, verdict])).toEqual([
      ['Copper, total', 'below'],
      ['Iron, total', 'above'],
    ])
    expect(view).toMatchObject({ state: 'issued', aboveLimit: 1, rendered: false, mailed: false })
  })

  it('is not issued while a determination is to be measured again', async () => {
    const point = await aPoint(at().database)
    const sample = await anAcceptedSample(at(), { clientId: point.clientId, pointId: point.id })
    const determinationIds = sample.details.map(({ id }) => id)
    const { batch } = await aSubmittedBatch(at(), { determinationIds })
    await (
      await manager(at())
    ).call(releaseBatch, {
      params: { id: batch.id },
      body: {
        version: batch.version,
        passphrase: PASSPHRASE,
        rerunPositionIds: batch.rows.filter(({ kind }) => kind === 'sample').map(({ id }) => id),
      },
    })
    expect(await certificatesOf(at(), sample.id)).toEqual([])
    await aReleasedBatch(at(), { determinationIds, samples: [BELOW] })
    const [certificate] = await certificatesOf(at(), sample.id)
    expect((certificate?.snapshot as { results: unknown[] }).results).toHaveLength(1)
  })

  it('is issued when the last open determination is withdrawn after the others were released', async () => {
    const sample = await anAcceptedSample(at(), { methodCodes: ['fe-phenanthroline', 'cu-bathocuproine'] })
    const [iron, copper] = [/Iron/, /Copper/].map((title) =>
      sample.details.find((one) => title.test(one.methodTitle)),
    )
    await aReleasedBatch(at(), { determinationIds: [iron?.id ?? ''] })
    expect(await certificatesOf(at(), sample.id)).toEqual([])
    const withdrawn = await (
      await manager(at())
    ).call(withdrawDetermination, {
      params: { id: copper?.id ?? '' },
      body: { version: copper?.version ?? 1, reason: 'The client needs it no more' },
    })
    expect(withdrawn.state).toBe('reported')
    expect((await certificatesOf(at(), sample.id)).map(({ state }) => state)).toEqual(['issued'])
  })

  it('says what was so at its issue, also when the client is renamed later', async () => {
    const { id, clientId } = await aCertificate(at())
    const before = await (await manager(at())).call(getCertificate, params(id))
    await at().database.db.transaction(SYSTEM, 'client.change', null, (trx) =>
      trx.updateTable('clients').set({ name: 'Renamed Waterworks' }).where('id', '=', clientId).execute(),
    )
    const after = await (await manager(at())).call(getCertificate, params(id))
    expect(after.clientName).toBe('Renamed Waterworks')
    expect(after.snapshot).toEqual(before.snapshot)
    expect(after.snapshot.client.name).not.toBe('Renamed Waterworks')
    await render(at(), id)
    const { bytes } = await (await manager(at())).file(certificatePdf, params(id))
    expect((await pdfPages(bytes)).join(' ')).not.toContain('Renamed')
    await expect(
      at().database.db.transaction(SYSTEM, 'test.forge', null, (trx) =>
        trx.updateTable('certificates').set({ snapshot: '{}' }).where('id', '=', id).execute(),
      ),
    ).rejects.toThrow()
  })

  it('names its readers and says when it was read, not when it was submitted', async () => {
    const { id, batch } = await aCertificate(at())
    const { snapshot } = await (await manager(at())).call(getCertificate, params(id))
    const row = batch.rows.find(({ kind }) => kind === 'sample')
    const lastRead = row?.readings
      .map(({ readAt }) => readAt)
      .sort()
      .at(-1)
    expect(snapshot.results[0]).toMatchObject({ analyst: 'Ana Lyst', analysedAt: lastRead })
  })
})

describe('issuing by hand', () => {
  it('wants something released, and is refused while one is current; two at once make one', async () => {
    const agent = await manager(at())
    const second = await at().as(await aSigner(at().database))
    const sample = await anAcceptedSample(at(), { methodCodes: ['fe-phenanthroline', 'cu-bathocuproine'] })
    const input = async () => {
      const { version } = await agent.call(getSample, params(sample.id))
      return { params: { id: sample.id }, body: { version } }
    }
    const empty = await agent.refused(issueCertificate, await input())
    expect(empty.detail).toContain('Nothing of this sample is released yet')
    const iron = sample.details.filter((one) => /Iron/.test(one.methodTitle)).map(({ id }) => id)
    await aReleasedBatch(at(), { determinationIds: iron })
    const both = await input()
    const problem = oneWins(
      await Promise.all([agent.send(issueCertificate, both), second.send(issueCertificate, both)]),
    )
    expect(problem.detail).toContain('is current')
    const stale = await agent.refused(issueCertificate, { ...both, body: { version: both.body.version + 9 } })
    expect(stale.code).toBe('stale')
    expect(await certificatesOf(at(), sample.id)).toHaveLength(1)
  })
})
