import { endpoints, type Endpoint } from '@weirlight/shared/contracts'
import { PERMISSIONS, ROLES, type Role } from '@weirlight/shared/permissions'
import { beforeAll, describe, expect, it } from 'vitest'
import { renderCertificate } from './modules/certificates/jobs/certificates.jobs.js'
import { JobsService } from './platform/index.js'
import { RouteCheck } from './platform/http/route-check.js'
import type { Agent, Sent } from './testing/agent.js'
import { PASSPHRASE } from './testing/builders/bench.builders.js'
import { aReleasedResult, theBench } from './testing/builders/results.builders.js'
import { aUser } from './testing/people.js'
import { useTestApp } from './testing/test-app.js'

/*
 * Every endpoint × nobody, each role, and a client of another utility: let in or refused exactly as shared/permissions says. What is
 * let in may still be refused for its content (a form that is empty on purpose): only 401 and 403 are the guard's.
 */
const at = useTestApp()

interface Request {
  params?: Record<string, string>
  query?: Record<string, unknown>
  body?: unknown
}
type Entry = (world: World) => Request

interface World {
  clientId: string
  pointId: string
  sampleId: string
  sampleNumber: string
  determinationId: string
  batchId: string
  positionId: string
  resultId: string
  calibrationId: string
  methodId: string
  instrumentId: string
  lotId: string
  contactId: string
  userId: string
  alertId: string
  certificateId: string
  mailId: string
  validationId: string
}

const nothing: Entry = () => ({})
const empty: Entry = () => ({ body: {} })
const of =
  (key: keyof World, body?: unknown): Entry =>
  (world) => ({ params: { id: world[key] }, ...(body === undefined ? {} : { body }) })
const token = '2222-2222-2222-2222-2222-2222'
/** a form older than any: allowed people are told so, and nothing changes */
const old = { version: 999_999 }
const reasoned = { ...old, reason: 'Tried by the table test' }

/** One request for each endpoint. An endpoint without an entry here, or an entry without an endpoint, fails the test. */
const TABLE: Record<string, Entry> = {
  getHealth: nothing,
  signIn: () => ({ body: { email: 'nobody@nowhere.example', password: 'these words open nothing' } }),
  getSession: nothing,
  signOut: nothing,
  getSecondFactor: nothing,
  startSecondFactor: empty,
  confirmSecondFactor: empty,
  removeSecondFactor: empty,
  forgotPassphrase: empty,
  resetPassphrase: empty,
  getInvitation: () => ({ params: { token } }),
  acceptInvitation: () => ({ params: { token }, body: {} }),
  listUsers: nothing,
  inviteUser: empty,
  inviteUserAgain: of('userId', old),
  changeUser: of('userId', {}),
  startPassphraseReset: of('userId', reasoned),
  takeOffSecondFactor: of('userId', reasoned),
  disableUser: of('userId', reasoned),
  enableUser: of('userId', reasoned),
  authoriseUser: of('userId', {}),
  getLaboratory: nothing,
  changeLaboratory: empty,
  listClients: nothing,
  getClient: of('clientId'),
  addClient: empty,
  changeClient: of('clientId', {}),
  addContact: of('clientId', {}),
  changeContact: of('contactId', {}),
  removeContact: of('contactId', reasoned),
  addPoint: of('clientId', {}),
  changePoint: of('pointId', {}),
  listMethods: nothing,
  getMethod: of('methodId'),
  listProgrammes: nothing,
  listMaterials: nothing,
  getMaterial: of('lotId'),
  addMaterial: empty,
  finishMaterial: of('lotId', old),
  withdrawMaterial: of('lotId', reasoned),
  listInstruments: nothing,
  getInstrument: of('instrumentId'),
  addInstrument: empty,
  recordCheck: of('instrumentId', {}),
  takeInstrumentOut: of('instrumentId', reasoned),
  returnInstrument: of('instrumentId', reasoned),
  getReadiness: nothing,
  listSamples: nothing,
  getSample: of('sampleId'),
  receiveSample: empty,
  decideAcceptance: of('sampleId', {}),
  correctSample: of('sampleId', {}),
  addDetermination: of('sampleId', {}),
  withdrawDetermination: of('determinationId', reasoned),
  listWaiting: nothing,
  previewManifest: nothing,
  applyManifest: () => ({ params: { id: '999999' } }),
  listCalibrations: nothing,
  getCalibration: of('calibrationId'),
  startCalibration: empty,
  saveCalibration: of('calibrationId', {}),
  submitCalibration: of('calibrationId', old),
  signCalibration: of('calibrationId', { ...old, passphrase: PASSPHRASE }),
  sendBackCalibration: of('calibrationId', reasoned),
  invalidateCalibration: of('calibrationId', reasoned),
  copyCalibration: of('calibrationId', {}),
  listBatches: nothing,
  getBatch: of('batchId'),
  openBatch: empty,
  saveReadings: of('batchId', {}),
  changePosition: of('positionId', {}),
  changeBatch: of('batchId', {}),
  addVerification: of('batchId', old),
  recordFindingAction: of('batchId', {}),
  previewReadings: of('batchId'),
  applyReadings: (world) => ({ params: { id: world.batchId, uploadId: '999999' }, body: {} }),
  runSheetFile: of('batchId'),
  submitBatch: of('batchId', old),
  returnBatch: of('batchId', reasoned),
  releaseBatch: of('batchId', { ...old, passphrase: PASSPHRASE }),
  listResults: nothing,
  resultTrend: (world) => ({ query: { pointId: world.pointId, analyte: 'Fe' } }),
  exportResults: () => ({ query: { format: 'csv' } }),
  getStory: of('resultId'),
  listAlerts: nothing,
  getAlert: of('alertId'),
  acknowledgeAlert: of('alertId', { ...old, note: '' }),
  closeAlert: of('alertId', reasoned),
  cancelAlert: of('alertId', reasoned),
  listCertificates: nothing,
  getCertificate: of('certificateId'),
  certificatePdf: of('certificateId'),
  issueCertificate: of('sampleId', old),
  amendCertificate: of('certificateId', { ...reasoned, passphrase: PASSPHRASE }),
  withdrawCertificate: of('certificateId', reasoned),
  sendCertificateAgain: of('certificateId'),
  checkCertificate: () => ({ params: { code: '2222-2222-2222-2222' } }),
  portalNow: nothing,
  portalResults: nothing,
  portalTrend: (world) => ({ query: { pointId: world.pointId, analyte: 'Fe' } }),
  portalUtility: nothing,
  listHistory: nothing,
  historyFilters: nothing,
  exportHistory: nothing,
  listSeals: nothing,
  verifySeals: nothing,
  listMail: nothing,
  retryMail: of('mailId'),
  getToday: nothing,
  goTo: (world) => ({ query: { number: world.sampleNumber } }),
  getControlChart: (world) => ({ query: { methodId: world.methodId, kind: 'control' } }),
  listValidationRuns: nothing,
  runValidation: nothing,
  validationPdf: of('validationId'),
  validationJson: of('validationId'),
}

/** Who is let in; a client only to what its role may do at all. */
const rolesFor = ({ permission }: Endpoint): readonly Role[] =>
  permission === 'public' || permission === 'signed-in' ? ROLES : PERMISSIONS[permission]
const codeOf = (sent: Sent) => (sent.json as { code?: string } | undefined)?.code

let world: World
const people = new Map<Role | 'stranger', { userId: string }>()

beforeAll(async () => {
  const bench = await theBench(at())
  const { result, batch, clientId, sampleId, pointId } = await aReleasedResult(at())
  const { db } = at().database
  const certificate = await db.fresh.selectFrom('certificates').select('id').executeTakeFirstOrThrow()
  await at().get(JobsService).runNow(renderCertificate, { id: certificate.id })
  const mail = await db.fresh.selectFrom('mailMessages').select('id').limit(1).executeTakeFirstOrThrow()
  const lot = await db.fresh.selectFrom('materialLots').select('id').limit(1).executeTakeFirstOrThrow()
  const contact = await db.fresh.selectFrom('contacts').select('id').limit(1).executeTakeFirstOrThrow()
  const validation = await db.unwatched((trx) =>
    trx
      .insertInto('validationRuns')
      .values({
        byId: bench.reviewer.userId,
        engineVersion: '1',
        cases: 0,
        passed: 0,
        failed: 0,
        report: '{}',
        sha256: '',
        pdf: Buffer.from('%PDF-'),
      })
      .returning('id')
      .executeTakeFirstOrThrow(),
  )
  for (const role of ['technician', 'auditor', 'administrator'] as const) {
    people.set(role, await aUser(db, { role }))
  }
  people.set('qa-manager', bench.reviewer)
  people.set('client', await aUser(db, { role: 'client', clientId }))
  // another utility, with an alert and a certificate of its own
  const other = await aReleasedResult(at())
  people.set('stranger', await aUser(db, { role: 'client', clientId: other.clientId }))
  const position = batch.rows.find(({ kind }) => kind === 'sample')
  world = {
    clientId,
    pointId,
    sampleId,
    sampleNumber: result.sampleNumber,
    determinationId: position?.determinationId ?? '',
    batchId: batch.id,
    positionId: position?.id ?? '',
    resultId: result.id,
    calibrationId: bench.calibrationId,
    methodId: bench.methodId,
    instrumentId: bench.instrumentId,
    lotId: lot.id,
    contactId: contact.id,
    userId: bench.analyst.userId,
    alertId: (
      await db.fresh
        .selectFrom('alerts')
        .select('id')
        .where('resultId', '=', result.id)
        .executeTakeFirstOrThrow()
    ).id,
    certificateId: certificate.id,
    mailId: mail.id,
    validationId: validation.id,
  }
}, 120_000)

const sessions = new Map<string, Agent>()
/** one session each; signing out gets one to itself */
async function agentOf(who: Role | 'stranger', { name }: Endpoint): Promise<Agent> {
  const key = name === 'signOut' ? `${who}:${name}` : who
  const known = sessions.get(key)
  if (known) return known
  const agent = await at().as(people.get(who) ?? { userId: '' })
  sessions.set(key, agent)
  return agent
}

describe('the table', () => {
  it('has one entry for each endpoint, and the server serves exactly these', () => {
    const names = endpoints.map(({ name }) => name).sort()
    expect(Object.keys(TABLE).sort()).toEqual(names)
    const { undeclared, served } = at().get(RouteCheck).routes()
    expect(undeclared).toEqual([])
    expect(served.map(({ name }) => name).sort()).toEqual(names)
  })

  it('names for each action at least one role, and no action nobody asks for', () => {
    const asked = new Set(endpoints.map(({ permission }) => permission))
    for (const [action, roles] of Object.entries(PERMISSIONS)) {
      expect(roles.length, action).toBeGreaterThan(0)
      expect(asked.has(action as keyof typeof PERMISSIONS), action).toBe(true)
    }
  })
})

describe.each(endpoints.map((endpoint) => [endpoint.name, endpoint] as const))('%s', (name, endpoint) => {
  const request = () => TABLE[name]?.(world) ?? {}

  it(`lets nobody in without a session${endpoint.permission === 'public' ? ', where it is not public' : ''}`, async () => {
    const sent = await at().anonymous().send(endpoint, request())
    if (endpoint.permission === 'public') expect(codeOf(sent) ?? '').not.toMatch(/^(signed-out|forbidden)$/)
    else expect([sent.status, codeOf(sent)]).toEqual([401, 'signed-out'])
  })

  it.each(ROLES)('is for %s as the table says', { timeout: 120_000 }, async (role) => {
    const sent = await (await agentOf(role, endpoint)).send(endpoint, request())
    if (!rolesFor(endpoint).includes(role)) {
      expect([sent.status, codeOf(sent)]).toEqual([403, 'forbidden'])
      return
    }
    if (endpoint.permission !== 'public') expect([401, 403]).not.toContain(sent.status)
    expect(codeOf(sent) ?? '').not.toMatch(/^(signed-out|forbidden|internal)$/)
    if (endpoint.method === 'GET' && endpoint.permission !== 'public') expect(sent.status).toBe(200)
  })

  it('shows a client of another utility nothing of it', async () => {
    const sent = await (await agentOf('stranger', endpoint)).send(endpoint, request())
    if (!rolesFor(endpoint).includes('client')) {
      expect([sent.status, codeOf(sent)]).toEqual([403, 'forbidden'])
      return
    }
    const isRow = 'params' in request() && endpoint.permission !== 'public'
    if (isRow) expect([sent.status, codeOf(sent)]).toEqual([404, 'not-found'])
    const text = sent.bytes.toString('utf8')
    expect(text).not.toContain(world.sampleNumber)
    expect(text).not.toContain(`"resultId":"${world.resultId}"`)
    expect(text).not.toContain(`"clientId":"${world.clientId}"`)
  })
})

describe('a client sees its own', () => {
  it('where another is shown nothing: the answers are not empty for everybody', async () => {
    const own = async (name: string) => {
      const endpoint = endpoints.find((one) => one.name === name)
      if (!endpoint) throw new Error(name)
      return (
        await (await agentOf('client', endpoint)).send(endpoint, TABLE[name]?.(world) ?? {})
      ).bytes.toString()
    }
    for (const name of ['listAlerts', 'listCertificates', 'portalNow', 'portalResults', 'getCertificate']) {
      expect(await own(name), name).toContain(world.sampleNumber)
    }
    expect(await own('portalTrend')).toContain(`"resultId":"${world.resultId}"`)
  })
})
