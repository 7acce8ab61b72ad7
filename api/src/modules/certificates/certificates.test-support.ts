import { getCertificate } from '@weirlight/shared/contracts'
import { beforeAll } from 'vitest'
import { DocumentsService, JobsService } from '../../platform/index.js'
import { PASSPHRASE } from '../../testing/builders/bench.builders.js'
import { aReleasedResult, theBench } from '../../testing/builders/results.builders.js'
import { FakeSmtp } from '../../testing/fake-smtp.js'
import { aUser } from '../../testing/people.js'
import { useTestApp, type TestApp } from '../../testing/test-app.js'
import { ResultsModule } from '../results/index.js'
import { CertificatesModule } from './index.js'
import { renderCertificate } from './jobs/certificates.jobs.js'

/** With the thread that lays out documents already there: run from the sources it takes its time to start. */
export function useCertificatesApp(smtp = new FakeSmtp()): () => TestApp {
  const at = useTestApp({ imports: [ResultsModule, CertificatesModule], smtp })
  beforeAll(async () => {
    await at()
      .get(DocumentsService)
      .render({ title: 'warm', createdAt: at().database.clock.now(), content: 'warm' })
  })
  return at
}

export const manager = async (at: TestApp) => at.as((await theBench(at)).reviewer)
export const params = (id: string) => ({ params: { id } })

export const certificatesOf = (at: TestApp, sampleId: string) =>
  at.database.db.fresh
    .selectFrom('certificates')
    .selectAll()
    .where('sampleId', '=', sampleId)
    .orderBy('id')
    .execute()

export const render = (at: TestApp, id: string) => at.get(JobsService).runNow(renderCertificate, { id })

export async function aCertificate(at: TestApp, changes: Parameters<typeof aReleasedResult>[1] = {}) {
  const released = await aReleasedResult(at, changes)
  const [row] = await certificatesOf(at, released.sampleId)
  if (!row) throw new Error('No certificate was issued.')
  const client = await aUser(at.database.db, { role: 'client', clientId: released.clientId })
  return { ...released, id: row.id, client }
}

export async function aRenderedCertificate(at: TestApp) {
  const certificate = await aCertificate(at)
  await render(at, certificate.id)
  const view = await (await manager(at)).call(getCertificate, params(certificate.id))
  return { ...certificate, view }
}

export const amend = ({ id, version }: { id: string; version: number }, changes: object = {}) => ({
  params: { id },
  body: { version, passphrase: PASSPHRASE, reason: 'The time of collection was wrong', ...changes },
})
