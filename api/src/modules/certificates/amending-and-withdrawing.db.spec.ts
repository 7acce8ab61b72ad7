import {
  amendCertificate,
  certificatePdf,
  correctSample,
  getCertificate,
  getSample,
  issueCertificate,
  withdrawCertificate,
  type CertificateView,
} from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import { aSigner } from '../../testing/builders/bench.builders.js'
import { aContact, aReleasedBatch, BELOW } from '../../testing/builders/results.builders.js'
import { anAcceptedSample, aPoint } from '../../testing/builders/samples.builders.js'
import { mailAbout } from '../../testing/mailbox.js'
import { oneWins } from '../../testing/one-wins.js'
import { packed, pdfPages } from '../../testing/pdf-text.js'
import {
  amend,
  aRenderedCertificate,
  certificatesOf,
  manager,
  params,
  render,
  useCertificatesApp,
} from './certificates.test-support.js'

// Absorbances and what they come to are constructed.
const at = useCertificatesApp()

describe('amending', () => {
  async function corrected(view: CertificateView): Promise<void> {
    const agent = await manager(at())
    const sample = await agent.call(getSample, params(view.sampleId))
    await agent.call(correctSample, {
      params: { id: view.sampleId },
      body: {
        version: sample.version,
        reason: 'The label said another hour',
        collectedAt: new Date(Date.parse(sample.collectedAt) - 3_600_000).toISOString(),
        collectedBy: 'S. Second',
        preservation: sample.preservation,
        ph: sample.ph,
        temperatureC: sample.temperatureC,
        container: sample.container,
        filteredInField: sample.filteredInField,
        condition: sample.condition,
        remarks: sample.remarks,
      },
    })
  }

  it('issues a new one with what was, is and why, and sends it to whoever had the old one', async () => {
    const { id, clientId, view } = await aRenderedCertificate(at())
    const [first] = await mailAbout(at(), { kind: 'certificate', id })
    // the contact of then left; another came
    await at().database.db.transaction(SYSTEM, 'contact.change', null, (trx) =>
      trx.updateTable('contacts').set({ active: false }).where('clientId', '=', clientId).execute(),
    )
    await aContact(at().database, { clientId, email: `new-${id}@utility.example` })
    await corrected(view)
    const agent = await manager(at())
    const wrong = await agent.refused(
      amendCertificate,
      amend(view, { passphrase: 'not the right words here' }),
    )
    expect(wrong).toMatchObject({ code: 'wrong-passphrase', errors: [{ path: 'passphrase' }] })
    const amended = await agent.call(amendCertificate, amend(view))
    expect(amended).toMatchObject({ state: 'issued', number: `${view.number}-A1`, amends: { id } })
    expect(amended.snapshot).toMatchObject({
      replaces: view.number,
      replacementReason: 'The time of collection was wrong',
    })
    const changes = new Map(amended.snapshot.changes.map(({ what, was, is }) => [what, [was, is]]))
    expect(changes.get('Collected by')).toEqual(['R. Sampler', 'S. Second'])
    expect(changes.get('Collected')?.[0]).not.toBe(changes.get('Collected')?.[1])
    expect([...changes.keys()].sort()).toEqual(['Collected', 'Collected by', 'Contact'])
    const old = await agent.call(getCertificate, params(id))
    expect(old).toMatchObject({ state: 'superseded', amendedBy: { number: amended.number } })

    await render(at(), amended.id)
    const recipients = (await mailAbout(at(), { kind: 'certificate', id: amended.id })).map(
      ({ recipient }) => recipient,
    )
    expect(recipients.sort()).toEqual([`new-${id}@utility.example`, first?.recipient].sort())
    const { bytes } = await agent.file(certificatePdf, params(amended.id))
    const text = packed((await pdfPages(bytes)).join(' '))
    for (const part of [
      `amendment to ${view.number}, which it replaces`,
      'What was amended, and why: The time of collection was wrong',
      'Collected byR. SamplerS. Second',
    ]) {
      expect(text).toContain(packed(part))
    }
    const signature = await at()
      .database.db.read.selectFrom('signatures')
      .select(['meaning', 'printedName'])
      .where('thing', '=', 'certificates')
      .where('thingId', '=', amended.id)
      .execute()
    expect(signature).toEqual([{ meaning: 'amended', printedName: 'Quentin Abel' }])
    // the old document is still there, as issued
    expect((await agent.file(certificatePdf, params(id))).bytes.length).toBe(view.bytes)
  })

  it('happens by itself when further results of the sample are released', async () => {
    const point = await aPoint(at().database)
    const sample = await anAcceptedSample(at(), {
      clientId: point.clientId,
      pointId: point.id,
      methodCodes: ['fe-phenanthroline', 'cu-bathocuproine'],
    })
    const [iron, copper] = [/Iron/, /Copper/].map((title) =>
      sample.details.filter((one) => title.test(one.methodTitle)).map(({ id }) => id),
    )
    await aReleasedBatch(at(), { determinationIds: iron ?? [] })
    const agent = await manager(at())
    const now = await agent.call(getSample, params(sample.id))
    const first = await agent.call(issueCertificate, {
      params: { id: sample.id },
      body: { version: now.version },
    })
    expect(first.snapshot.results.map(({ determination }) => determination)).toEqual(['Iron, total'])
    await aReleasedBatch(at(), { metal: 'Cu', determinationIds: copper ?? [], samples: [BELOW] })
    const all = await certificatesOf(at(), sample.id)
    expect(all.map(({ number, state }) => [number, state])).toEqual([
      [first.number, 'superseded'],
      [`${first.number}-A1`, 'issued'],
    ])
    const second = await agent.call(getCertificate, params(all[1]?.id ?? ''))
    expect(second.snapshot.replacementReason).toBe('Further results of the sample were released.')
    expect(second.snapshot.changes[0]).toMatchObject({ what: 'Copper, total', was: '–' })
  })

  it('of an older form, of a superseded one, and two at once: one wins', async () => {
    const { view } = await aRenderedCertificate(at())
    const second = await aSigner(at().database)
    const [a, b] = await Promise.all([manager(at()), at().as(second)])
    const stale = await a.refused(amendCertificate, amend({ id: view.id, version: view.version + 1 }))
    expect(stale.code).toBe('stale')
    const problem = oneWins(
      await Promise.all([a.send(amendCertificate, amend(view)), b.send(amendCertificate, amend(view))]),
    )
    expect(problem.code).toBe('stale')
    const late = await a.refused(amendCertificate, amend({ id: view.id, version: view.version + 1 }))
    expect(late.detail).toContain('This certificate is superseded')
    expect((await certificatesOf(at(), view.sampleId)).map(({ state }) => state)).toEqual([
      'superseded',
      'issued',
    ])
  })
})

describe('withdrawing', () => {
  const withdraw = ({ id, version }: { id: string; version: number }) => ({
    params: { id },
    body: { version, reason: 'Bottles were mixed up' },
  })

  it('tells whoever had it, and leaves the sample free for another', async () => {
    const { id, view } = await aRenderedCertificate(at())
    const agent = await manager(at())
    const withdrawn = await agent.call(withdrawCertificate, withdraw(view))
    expect(withdrawn).toMatchObject({ state: 'withdrawn', withdrawnReason: 'Bottles were mixed up' })
    const mails = await mailAbout(at(), { kind: 'certificate', id })
    expect(mails.map(({ subject }) => subject)).toEqual([
      expect.stringContaining(`Certificate of analysis ${view.number}`),
      `Certificate ${view.number} is withdrawn`,
    ])
    expect(mails[1]?.bodyText).toContain('Reason: Bottles were mixed up')
    const sample = await agent.call(getSample, params(view.sampleId))
    const next = await agent.call(issueCertificate, {
      params: { id: view.sampleId },
      body: { version: sample.version },
    })
    expect(next.number).not.toBe(view.number)
    expect(next.snapshot.replaces).toBeNull()
  })

  it('two at once, and against an amendment: one wins', async () => {
    const second = await aSigner(at().database)
    const [a, b] = await Promise.all([manager(at()), at().as(second)])
    const one = await aRenderedCertificate(at())
    oneWins(
      await Promise.all([
        a.send(withdrawCertificate, withdraw(one.view)),
        b.send(withdrawCertificate, withdraw(one.view)),
      ]),
    )
    const two = await aRenderedCertificate(at())
    oneWins(
      await Promise.all([
        a.send(withdrawCertificate, withdraw(two.view)),
        b.send(amendCertificate, amend(two.view)),
      ]),
    )
  })
})
