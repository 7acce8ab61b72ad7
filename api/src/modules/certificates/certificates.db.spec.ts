import { createHash } from 'node:crypto'
import {
  amendCertificate,
  certificatePdf,
  checkCertificate,
  correctSample,
  getCertificate,
  getSample,
  issueCertificate,
  listCertificates,
  releaseBatch,
  sendCertificateAgain,
  withdrawCertificate,
  withdrawDetermination,
  type CertificateView,
} from '@weirlight/shared/contracts'
import type { Problem } from '@weirlight/shared/errors'
import type { Actor } from '@weirlight/shared/permissions'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { SYSTEM } from '../../platform/database/acting.js'
import { DocumentsService, JobsService } from '../../platform/index.js'
import { aSigner, PASSPHRASE } from '../../testing/builders/bench.builders.js'
import {
  aContact,
  aReleasedBatch,
  aReleasedResult,
  aSubmittedBatch,
  BELOW,
  theBench,
} from '../../testing/builders/results.builders.js'
import { anAcceptedSample, aPoint } from '../../testing/builders/samples.builders.js'
import { FakeSmtp } from '../../testing/fake-smtp.js'
import { letMailLeave, mailAbout } from '../../testing/mailbox.js'
import { packed, pdfPages } from '../../testing/pdf-text.js'
import { aUser } from '../../testing/people.js'
import { createTestApp, type TestApp } from '../../testing/test-app.js'
import { ResultsModule } from '../results/index.js'
import { CertificatesModule } from './index.js'
import { renderCertificate, sweepCertificates } from './jobs/certificates.jobs.js'

// Absorbances and what they come to are constructed.
const smtp = new FakeSmtp()
let app: TestApp
const at = () => app
beforeAll(async () => {
  await smtp.start()
  app = await createTestApp({ imports: [ResultsModule, CertificatesModule], settings: { smtpUrl: smtp.url } })
  // run from the sources, the thread that lays out documents takes its time to start
  await app
    .get(DocumentsService)
    .render({ title: 'warm', createdAt: app.database.clock.now(), content: 'warm' })
})
afterAll(async () => {
  await app.close()
  await smtp.stop()
})

const as = (actor: Actor) => at().as(actor)
const manager = async () => as((await theBench(at())).reviewer)
const certificatesOf = (sampleId: string) =>
  at()
    .database.db.fresh.selectFrom('certificates')
    .selectAll()
    .where('sampleId', '=', sampleId)
    .orderBy('id')
    .execute()
const render = (id: string) => at().get(JobsService).runNow(renderCertificate, { id })
const params = (id: string) => ({ params: { id } })
const inHistory = (action: string) =>
  at().database.db.read.selectFrom('history').selectAll().where('action', '=', action).execute()

async function aCertificate(changes: Parameters<typeof aReleasedResult>[1] = {}) {
  const released = await aReleasedResult(at(), changes)
  const [row] = await certificatesOf(released.sampleId)
  if (!row) throw new Error('No certificate was issued.')
  const client = await aUser(at().database.db, { role: 'client', clientId: released.clientId })
  return { ...released, id: row.id, client }
}
async function aRenderedCertificate() {
  const certificate = await aCertificate()
  await render(certificate.id)
  const view = await (await manager()).call(getCertificate, params(certificate.id))
  return { ...certificate, view }
}
function oneWins(sent: { status: number; json: unknown }[]): Problem {
  expect(sent.map(({ status }) => status).sort()).toEqual([200, 409])
  return sent.find(({ status }) => status === 409)?.json as Problem
}
const amend = ({ id, version }: { id: string; version: number }, changes: object = {}) => ({
  params: { id },
  body: { version, passphrase: PASSPHRASE, reason: 'The time of collection was wrong', ...changes },
})

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
    expect(await certificatesOf(sample.id)).toEqual([])
    await aReleasedBatch(at(), { metal: 'Cu', determinationIds: idOf(/Copper/), samples: [BELOW] })
    const [certificate, ...more] = await certificatesOf(sample.id)
    expect(more).toEqual([])
    expect(certificate?.number).toMatch(/^C-\d\d-\d{4}$/)
    const view = await (await manager()).call(getCertificate, params(certificate?.id ?? ''))
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
      await manager()
    ).call(releaseBatch, {
      params: { id: batch.id },
      body: {
        version: batch.version,
        passphrase: PASSPHRASE,
        rerunPositionIds: batch.rows.filter(({ kind }) => kind === 'sample').map(({ id }) => id),
      },
    })
    expect(await certificatesOf(sample.id)).toEqual([])
    await aReleasedBatch(at(), { determinationIds, samples: [BELOW] })
    const [certificate] = await certificatesOf(sample.id)
    expect((certificate?.snapshot as { results: unknown[] }).results).toHaveLength(1)
  })

  it('is issued when the last open determination is withdrawn after the others were released', async () => {
    const sample = await anAcceptedSample(at(), { methodCodes: ['fe-phenanthroline', 'cu-bathocuproine'] })
    const [iron, copper] = [/Iron/, /Copper/].map((title) =>
      sample.details.find((one) => title.test(one.methodTitle)),
    )
    await aReleasedBatch(at(), { determinationIds: [iron?.id ?? ''] })
    expect(await certificatesOf(sample.id)).toEqual([])
    const withdrawn = await (
      await manager()
    ).call(withdrawDetermination, {
      params: { id: copper?.id ?? '' },
      body: { version: copper?.version ?? 1, reason: 'The client needs it no more' },
    })
    expect(withdrawn.state).toBe('reported')
    expect((await certificatesOf(sample.id)).map(({ state }) => state)).toEqual(['issued'])
  })

  it('says what was so at its issue, also when the client is renamed later', async () => {
    const { id, clientId } = await aCertificate()
    const before = await (await manager()).call(getCertificate, params(id))
    await at().database.db.transaction(SYSTEM, 'client.change', null, (trx) =>
      trx.updateTable('clients').set({ name: 'Renamed Waterworks' }).where('id', '=', clientId).execute(),
    )
    const after = await (await manager()).call(getCertificate, params(id))
    expect(after.clientName).toBe('Renamed Waterworks')
    expect(after.snapshot).toEqual(before.snapshot)
    expect(after.snapshot.client.name).not.toBe('Renamed Waterworks')
    await render(id)
    const { bytes } = await (await manager()).file(certificatePdf, params(id))
    expect((await pdfPages(bytes)).join(' ')).not.toContain('Renamed')
    await expect(
      at().database.db.transaction(SYSTEM, 'test.forge', null, (trx) =>
        trx.updateTable('certificates').set({ snapshot: '{}' }).where('id', '=', id).execute(),
      ),
    ).rejects.toThrow()
  })

  it('names its readers and says when it was read, not when it was submitted', async () => {
    const { id, batch } = await aCertificate()
    const { snapshot } = await (await manager()).call(getCertificate, params(id))
    const row = batch.rows.find(({ kind }) => kind === 'sample')
    const lastRead = row?.readings
      .map(({ readAt }) => readAt)
      .sort()
      .at(-1)
    expect(snapshot.results[0]).toMatchObject({ analyst: 'Ana Lyst', analysedAt: lastRead })
  })
})

describe('its document', () => {
  it('is made once, whoever tries, and mailed once with the very bytes that are kept', async () => {
    const { id } = await aCertificate()
    await Promise.all([render(id), render(id)])
    await render(id)
    const kept = await at()
      .database.db.fresh.selectFrom('certificateDocuments')
      .selectAll()
      .where('certificateId', '=', id)
      .execute()
    expect(kept).toHaveLength(1)
    const [document] = kept
    expect(
      createHash('sha256')
        .update(document?.pdf ?? '')
        .digest('hex'),
    ).toBe(document?.sha256)
    const mails = await mailAbout(at(), { kind: 'certificate', id })
    expect(mails).toHaveLength(1)
    await letMailLeave(at())
    await letMailLeave(at())
    const received = smtp.received.filter(({ to }) => to.includes(mails[0]?.recipient ?? ''))
    expect(received).toHaveLength(1)
    const attached = /Content-Type: application\/pdf[\s\S]*?\r\n\r\n([\s\S]*?)\r\n--/.exec(
      received[0]?.raw ?? '',
    )?.[1]
    expect(Buffer.from(attached ?? '', 'base64').equals(document?.pdf ?? Buffer.alloc(1))).toBe(true)
    expect((await (await manager()).call(getCertificate, params(id))).mailed).toBe(true)
  })

  it('is found by the beginning of its own number and of its sample’s', async () => {
    const { view } = await aRenderedCertificate()
    const other = await aCertificate()
    const agent = await manager()
    for (const number of [view.number, view.number.toLowerCase(), view.snapshot.sample.number]) {
      const { items } = await agent.call(listCertificates, { query: { number } })
      expect(items.map(({ id }) => id)).toEqual([view.id])
    }
    const all = await agent.call(listCertificates, { query: { number: 'C-' } })
    expect(all.items.map(({ id }) => id)).toEqual(expect.arrayContaining([view.id, other.id]))
  })

  it('says on paper what the snapshot says: every result, limit, statement, rule, name, page and caution', async () => {
    const { view } = await aRenderedCertificate()
    const { bytes } = await (await manager()).file(certificatePdf, params(view.id))
    const pages = await pdfPages(bytes)
    const text = packed(pages.join(' '))
    const { snapshot } = view
    const said = [
      snapshot.title,
      snapshot.number,
      snapshot.laboratory.name,
      snapshot.laboratory.accreditation,
      snapshot.client.name,
      snapshot.client.contact,
      snapshot.sample.number,
      snapshot.sample.point,
      snapshot.sample.pointCode,
      snapshot.sample.collectedBy,
      ...snapshot.results.flatMap((line) => [
        line.determination,
        line.text,
        line.uncertaintyText,
        line.unit,
        line.quantificationLimit,
        `${line.limitValue} ${line.limitUnit}`,
        line.limitName,
        line.limitSource,
        line.statement,
        line.decisionRule,
        line.method,
        line.edition,
        line.analyst,
        line.approval,
      ]),
      ...snapshot.notes,
      snapshot.releasedBy,
      snapshot.releasedByRole,
      snapshot.verificationCode,
      snapshot.checkUrl,
      snapshot.caution,
      `engine ${snapshot.engineVersion}`,
      'End of certificate',
      'Not to be reproduced except in full',
    ]
    for (const one of said) {
      expect(one).not.toBe('')
      expect(text).toContain(packed(one))
    }
    // the result stands in its row as the page shows it, with its uncertainty and unit beside it
    const [line] = snapshot.results
    expect(text).toContain(packed(`${line?.text ?? ''}${line?.uncertaintyText ?? ''}${line?.unit ?? ''}`))
    pages.forEach((page, index) =>
      expect(packed(page)).toContain(packed(`Page ${index + 1} of ${pages.length}`)),
    )
  })

  it('that is not there yet is made by the sweep, and asking for it says that it is being made', async () => {
    const { id } = await aCertificate()
    const early = await (await manager()).refused(certificatePdf, params(id))
    expect(early).toMatchObject({ code: 'not-allowed-now' })
    const jobs = async () => {
      const { rows } = await at().database.owner.pool.query(
        `select 1 from pgboss.job where name = 'certificate.render' and data -> 'input' ->> 'id' = $1`,
        [id],
      )
      return rows.length
    }
    expect(await jobs()).toBe(1)
    await at().get(JobsService).runNow(sweepCertificates, {})
    expect(await jobs()).toBe(2)
    await render(id)
    await at().get(JobsService).runNow(sweepCertificates, {})
    expect(await jobs()).toBe(2)
  })

  it('is kept as being opened when the client opens it, and not when the laboratory does', async () => {
    const { id, client, view } = await aRenderedCertificate()
    expect(view.opened).toBe(false)
    await (await manager()).file(certificatePdf, params(id))
    expect((await (await manager()).call(getCertificate, params(id))).openings).toEqual([])
    const agent = await as(client)
    const { headers } = await agent.file(certificatePdf, params(id))
    expect(headers['content-type']).toBe('application/pdf')
    const seen = await (await manager()).call(getCertificate, params(id))
    expect(seen.openings.map(({ by }) => by)).toEqual([client.name])
    expect(seen.opened).toBe(true)
    expect((await inHistory('certificate.open')).some((entry) => entry.actorId === client.userId)).toBe(true)
    expect((await agent.call(getCertificate, params(id))).openings).toEqual([])
  })

  it('and everything of it is not found by another client', async () => {
    const { id, client } = await aRenderedCertificate()
    const other = await aRenderedCertificate()
    const stranger = await as(other.client)
    expect((await stranger.refused(certificatePdf, params(id))).code).toBe('not-found')
    expect((await stranger.refused(getCertificate, params(id))).code).toBe('not-found')
    const listed = await stranger.call(listCertificates, { query: { clientId: client.clientId ?? '' } })
    expect(listed.items.map((item) => item.id)).toEqual([other.id])
    expect((await (await manager()).call(getCertificate, params(id))).openings).toEqual([])
  })
})

describe('amending', () => {
  async function corrected(view: CertificateView): Promise<void> {
    const agent = await manager()
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
    const { id, clientId, view } = await aRenderedCertificate()
    const [first] = await mailAbout(at(), { kind: 'certificate', id })
    // the contact of then left; another came
    await at().database.db.transaction(SYSTEM, 'contact.change', null, (trx) =>
      trx.updateTable('contacts').set({ active: false }).where('clientId', '=', clientId).execute(),
    )
    await aContact(at().database, { clientId, email: `new-${id}@utility.example` })
    await corrected(view)
    const agent = await manager()
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

    await render(amended.id)
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
    const agent = await manager()
    const now = await agent.call(getSample, params(sample.id))
    const first = await agent.call(issueCertificate, {
      params: { id: sample.id },
      body: { version: now.version },
    })
    expect(first.snapshot.results.map(({ determination }) => determination)).toEqual(['Iron, total'])
    await aReleasedBatch(at(), { metal: 'Cu', determinationIds: copper ?? [], samples: [BELOW] })
    const all = await certificatesOf(sample.id)
    expect(all.map(({ number, state }) => [number, state])).toEqual([
      [first.number, 'superseded'],
      [`${first.number}-A1`, 'issued'],
    ])
    const second = await agent.call(getCertificate, params(all[1]?.id ?? ''))
    expect(second.snapshot.replacementReason).toBe('Further results of the sample were released.')
    expect(second.snapshot.changes[0]).toMatchObject({ what: 'Copper, total', was: '–' })
  })

  it('of an older form, of a superseded one, and two at once: one wins', async () => {
    const { view } = await aRenderedCertificate()
    const second = await aSigner(at().database)
    const [a, b] = await Promise.all([manager(), as(second)])
    const stale = await a.refused(amendCertificate, amend({ id: view.id, version: view.version + 1 }))
    expect(stale.code).toBe('stale')
    const problem = oneWins(
      await Promise.all([a.send(amendCertificate, amend(view)), b.send(amendCertificate, amend(view))]),
    )
    expect(problem.code).toBe('stale')
    const late = await a.refused(amendCertificate, amend({ id: view.id, version: view.version + 1 }))
    expect(late.detail).toContain('This certificate is superseded')
    expect((await certificatesOf(view.sampleId)).map(({ state }) => state)).toEqual(['superseded', 'issued'])
  })
})

describe('withdrawing', () => {
  const withdraw = ({ id, version }: { id: string; version: number }) => ({
    params: { id },
    body: { version, reason: 'Bottles were mixed up' },
  })

  it('tells whoever had it, and leaves the sample free for another', async () => {
    const { id, view } = await aRenderedCertificate()
    const agent = await manager()
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
    const [a, b] = await Promise.all([manager(), as(second)])
    const one = await aRenderedCertificate()
    oneWins(
      await Promise.all([
        a.send(withdrawCertificate, withdraw(one.view)),
        b.send(withdrawCertificate, withdraw(one.view)),
      ]),
    )
    const two = await aRenderedCertificate()
    oneWins(
      await Promise.all([
        a.send(withdrawCertificate, withdraw(two.view)),
        b.send(amendCertificate, amend(two.view)),
      ]),
    )
  })
})

describe('issuing by hand', () => {
  it('wants something released, and is refused while one is current; two at once make one', async () => {
    const agent = await manager()
    const second = await as(await aSigner(at().database))
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
    expect(await certificatesOf(sample.id)).toHaveLength(1)
  })
})

describe('sending again', () => {
  it('queues one more message a recipient and minute, for the current certificate alone', async () => {
    const { id, view } = await aRenderedCertificate()
    const agent = await manager()
    at().database.clock.pin(at().database.clock.now())
    try {
      await agent.call(sendCertificateAgain, params(id))
      await agent.call(sendCertificateAgain, params(id))
    } finally {
      at().database.clock.unpin()
    }
    expect(await mailAbout(at(), { kind: 'certificate', id })).toHaveLength(2)
    await agent.call(amendCertificate, amend(view))
    expect((await agent.refused(sendCertificateAgain, params(id))).detail).toContain(
      'Only the current certificate is sent.',
    )
    const fresh = await aCertificate()
    expect((await agent.refused(sendCertificateAgain, params(fresh.id))).code).toBe('not-allowed-now')
  })
})

describe('checking a code', () => {
  const check = (code: string) => at().anonymous().call(checkCertificate, { params: { code } })

  it('needs no session, and says nothing of client, sample or results', async () => {
    const { view, result } = await aRenderedCertificate()
    const { verificationCode } = view.snapshot
    const answer = await check(verificationCode.toLowerCase())
    expect(answer).toEqual({
      found: true,
      number: view.number,
      state: 'issued',
      issuedAt: view.issuedAt,
      laboratoryName: view.snapshot.laboratory.name,
      timeZone: view.snapshot.timeZone,
      sha256: view.sha256,
      replacedBy: null,
    })
    const leaked = JSON.stringify(answer)
    for (const secret of [view.clientName, view.sampleNumber, view.pointName, `"${result.text}"`]) {
      expect(leaked).not.toContain(secret)
    }
    await (await manager()).call(amendCertificate, amend(view))
    expect(await check(verificationCode)).toMatchObject({
      state: 'superseded',
      replacedBy: `${view.number}-A1`,
    })
  })

  it('that nobody issued is not found, in the same words', async () => {
    expect(await check('2222-2222-2222-2222')).toMatchObject({ found: false, number: null, sha256: null })
    const problem = await at()
      .anonymous()
      .refused(checkCertificate, { params: { code: "1' or 1=1" } })
    expect(problem.code).toBe('invalid-input')
  })
})
