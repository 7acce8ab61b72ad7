import { createHash } from 'node:crypto'
import {
  amendCertificate,
  certificatePdf,
  checkCertificate,
  getCertificate,
  listCertificates,
  sendCertificateAgain,
} from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { JobsService } from '../../platform/index.js'
import { FakeSmtp } from '../../testing/fake-smtp.js'
import { letMailLeave, mailAbout } from '../../testing/mailbox.js'
import { packed, pdfPages } from '../../testing/pdf-text.js'
import {
  aCertificate,
  amend,
  aRenderedCertificate,
  manager,
  params,
  render,
  useCertificatesApp,
} from './certificates.test-support.js'
import { sweepCertificates } from './jobs/certificates.jobs.js'

// Absorbances and what they come to are constructed.
const smtp = new FakeSmtp()
const at = useCertificatesApp(smtp)
const inHistory = (action: string) =>
  at().database.db.read.selectFrom('history').selectAll().where('action', '=', action).execute()

describe('its document', () => {
  it('is made once, whoever tries, and mailed once with the very bytes that are kept', async () => {
    const { id } = await aCertificate(at())
    await Promise.all([render(at(), id), render(at(), id)])
    await render(at(), id)
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
    expect((await (await manager(at())).call(getCertificate, params(id))).mailed).toBe(true)
  })

  it('is found by the beginning of its own number and of its sample’s', async () => {
    const { view } = await aRenderedCertificate(at())
    const other = await aCertificate(at())
    const agent = await manager(at())
    for (const number of [view.number, view.number.toLowerCase(), view.snapshot.sample.number]) {
      const { items } = await agent.call(listCertificates, { query: { number } })
      expect(items.map(({ id }) => id)).toEqual([view.id])
    }
    const all = await agent.call(listCertificates, { query: { number: 'C-' } })
    expect(all.items.map(({ id }) => id)).toEqual(expect.arrayContaining([view.id, other.id]))
  })

  it('says on paper what the snapshot says: every result, limit, statement, rule, name, page and caution', async () => {
    const { view } = await aRenderedCertificate(at())
    const { bytes } = await (await manager(at())).file(certificatePdf, params(view.id))
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
    const { id } = await aCertificate(at())
    const early = await (await manager(at())).refused(certificatePdf, params(id))
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
    await render(at(), id)
    await at().get(JobsService).runNow(sweepCertificates, {})
    expect(await jobs()).toBe(2)
  })

  it('is kept as being opened when the client opens it, and not when the laboratory does', async () => {
    const { id, client, view } = await aRenderedCertificate(at())
    expect(view.opened).toBe(false)
    await (await manager(at())).file(certificatePdf, params(id))
    expect((await (await manager(at())).call(getCertificate, params(id))).openings).toEqual([])
    const agent = await at().as(client)
    const { headers } = await agent.file(certificatePdf, params(id))
    expect(headers['content-type']).toBe('application/pdf')
    const seen = await (await manager(at())).call(getCertificate, params(id))
    expect(seen.openings.map(({ by }) => by)).toEqual([client.name])
    expect(seen.opened).toBe(true)
    expect((await inHistory('certificate.open')).some((entry) => entry.actorId === client.userId)).toBe(true)
    expect((await agent.call(getCertificate, params(id))).openings).toEqual([])
  })

  it('and everything of it is not found by another client', async () => {
    const { id, client } = await aRenderedCertificate(at())
    const other = await aRenderedCertificate(at())
    const stranger = await at().as(other.client)
    expect((await stranger.refused(certificatePdf, params(id))).code).toBe('not-found')
    expect((await stranger.refused(getCertificate, params(id))).code).toBe('not-found')
    const listed = await stranger.call(listCertificates, { query: { clientId: client.clientId ?? '' } })
    expect(listed.items.map((item) => item.id)).toEqual([other.id])
    expect((await (await manager(at())).call(getCertificate, params(id))).openings).toEqual([])
  })
})

describe('sending again', () => {
  it('queues one more message a recipient and minute, for the current certificate alone', async () => {
    const { id, view } = await aRenderedCertificate(at())
    const agent = await manager(at())
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
    const fresh = await aCertificate(at())
    expect((await agent.refused(sendCertificateAgain, params(fresh.id))).code).toBe('not-allowed-now')
  })
})

describe('checking a code', () => {
  const check = (code: string) => at().anonymous().call(checkCertificate, { params: { code } })

  it('needs no session, and says nothing of client, sample or results', async () => {
    const { view, result } = await aRenderedCertificate(at())
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
    await (await manager(at())).call(amendCertificate, amend(view))
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
