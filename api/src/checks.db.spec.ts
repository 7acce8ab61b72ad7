import { readdirSync, readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { amendCertificate, getCertificate, returnBatch } from '@weirlight/shared/contracts'
import pg from 'pg'
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import { renderCertificate } from './modules/certificates/jobs/certificates.jobs.js'
import { JobsService } from './platform/index.js'
import { PASSPHRASE } from './testing/builders/bench.builders.js'
import {
  ABOVE,
  aReleasedBatch,
  aReleasedResult,
  aRun,
  aSubmittedBatch,
  BELOW,
  theBench,
} from './testing/builders/results.builders.js'
import { letMailLeave } from './testing/mailbox.js'
import { useTestApp } from './testing/test-app.js'
import { withDatabase } from './testing/test-urls.js'

/*
 * Each file of sql/checks returns no rows on a healthy database, and some on one that was meddled with. The meddling is a
 * superuser's, past every trigger, and is taken back each time.
 */
const FOLDER = fileURLToPath(new URL('../../sql/checks/', import.meta.url))
const FILES = readdirSync(FOLDER).filter((file) => file.endsWith('.sql'))
const check = (file: string) => readFileSync(`${FOLDER}${file}`, 'utf8')

const at = useTestApp()
let superuser: pg.Client

beforeAll(async () => {
  superuser = new pg.Client({
    connectionString: withDatabase(inject('database').urls.admin, at().database.name),
  })
  await superuser.connect()
  // a laboratory at work: open, submitted, sent back, released, measured again, corrected, amended
  const { reviewer } = await theBench(at())
  const agent = await at().as(reviewer)
  const { clientId, pointId, sampleId } = await aReleasedResult(at())
  await aReleasedResult(at(), { clientId, pointId, reading: BELOW })
  const rerun = await aSubmittedBatch(at(), { samples: [ABOVE, BELOW] })
  const sent = await aSubmittedBatch(at())
  await agent.call(returnBatch, {
    params: { id: sent.batch.id },
    body: { version: sent.batch.version, reason: 'Look at the blank once more' },
  })
  await aReleasedBatch(at(), { comment: 'Fine', samples: [BELOW] })
  await aRun(at())
  const [first] = await at()
    .database.db.fresh.selectFrom('certificates')
    .select('id')
    .where('sampleId', '=', sampleId)
    .execute()
  const id = first?.id ?? ''
  await at().get(JobsService).runNow(renderCertificate, { id })
  const { version } = await agent.call(getCertificate, { params: { id } })
  await agent.call(amendCertificate, {
    params: { id },
    body: { version, passphrase: PASSPHRASE, reason: 'Sent to the wrong address' },
  })
  expect(rerun.batch.state).toBe('submitted')
  await letMailLeave(at())
}, 120_000)
afterAll(async () => {
  await superuser.end()
})

/** One change each that its check must see. */
const MEDDLING: Record<string, string> = {
  'released-without-signature.sql': `delete from signatures where thing = 'batches'`,
  'signed-numbers-changed.sql': `update results set concentration = concentration + 1e-12 where state = 'released'`,
  'result-on-unsigned-calibration.sql': `delete from signatures where thing = 'calibrations'`,
  'own-work-released.sql': `insert into finding_actions (batch_id, finding_id, kind, text, by_id)
    select id, 'x', 'explained', 'x', released_by from batches where state = 'released' limit 1`,
  'certificate-with-unreleased-result.sql': `update results set state = 'not-reported' where state = 'released'`,
  'certificate-differs-from-results.sql': `update results set reported_text = '1' || reported_text where state = 'released'`,
  'certificate-without-document.sql': `update certificates set issued_at = now() - interval '25 hours'`,
  'document-hash.sql': `update certificate_documents set pdf = pdf || '\\x00'::bytea`,
  'two-current-certificates.sql': `drop index certificates_current;
    update certificates set state = 'issued' where state = 'superseded'`,
  'reported-without-certificate.sql': `update samples set state = 'reported' where id not in (select sample_id from certificates)`,
  'reading-superseded-twice.sql': `insert into position_readings (batch_id, position_id, replicate, absorbance_text, absorbance, read_by,
      source, supersedes_id, reason)
    select batch_id, position_id, replicate % 2 + 1, absorbance_text, absorbance, read_by, source, id, 'x' from position_readings limit 1`,
  'alert-missing.sql': `delete from alerts`,
  'alert-unfounded.sql': `update results set verdict = 'below' where id in (select result_id from alerts)`,
  'another-clients-row.sql': `update determinations set client_id = (select max(id) from clients) where id = (select min(id) from determinations)`,
  'history-gaps.sql': `delete from history where thing = 'position_readings' and operation = 'insert'`,
  'history-differs.sql': `update determinations set state = 'withdrawn' where id = (select min(id) from determinations)`,
  'states-apart.sql': `update determinations set state = 'requested' where state = 'released'`,
  'times-in-order.sql': `update results set released_at = measured_at - interval '1 minute' where state = 'released'`,
  'mail-stuck.sql': `update mail_messages set state = 'waiting', created_at = now() - interval '2 days'`,
}

describe.each(FILES)('%s', (file) => {
  it('finds nothing wrong with a laboratory at work', async () => {
    expect((await superuser.query(check(file))).rows).toEqual([])
  })

  it('finds what was meddled with', async () => {
    await superuser.query('begin')
    try {
      await superuser.query('set local session_replication_role = replica')
      await superuser.query(MEDDLING[file] ?? 'select 1')
      const { rows } = await superuser.query(check(file))
      expect(rows.length).toBeGreaterThan(0)
    } finally {
      await superuser.query('rollback')
    }
  })
})
