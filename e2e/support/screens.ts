import {
  getCertificate,
  listAlerts,
  listBatches,
  listCalibrations,
  listCertificates,
  listClients,
  listInstruments,
  listMaterials,
  listMethods,
  listResults,
  listSamples,
  listUsers,
  portalUtility,
} from '@weirlight/shared/contracts'
import { paths } from '@weirlight/shared/paths'
import { can, type Action, type Role } from '@weirlight/shared/permissions'

import type { Api } from './api.js'

/** Rows of the demonstration that a page of one thing is opened with. */
export interface Things {
  sample: string
  undecidedSample: string
  method: string
  material: string
  instrument: string
  client: string
  draft: string
  submittedCalibration: string
  calibrationInForce: string
  openBatch: string
  submittedBatch: string
  releasedBatch: string
  result: string
  alert: string
  certificate: string
  code: string
  person: string
  ownCertificate: string
  ownPoint: string
  ownAlert: string
}

type Path = keyof typeof paths
type Needs = Action | 'public'

interface Screen {
  name: string
  path: string
  needs: Needs
}

type Entry = (things: Things) => Screen[] | Screen

const one =
  (needs: Needs, path: (things: Things) => string): Entry =>
  (things) => ({ name: '', path: path(things), needs })

/** An address of the right kind that nothing stands behind. */
const MISSING = '999999999'

/** Every address of the application: a new one without an entry here does not compile. */
const ENTRIES: Record<Path, Entry | null> = {
  signIn: one('public', () => paths.signIn),
  forgot: one('public', () => paths.forgot),
  reset: one('public', () => paths.reset('a-link-that-is-long-gone')),
  invitation: one('public', () => paths.invitation('a-link-that-is-long-gone')),
  account: one('today.read', () => paths.account),
  check: one('public', () => paths.check),
  checkCode: one('public', ({ code }) => paths.checkCode(code)),

  today: one('today.read', () => paths.today),
  receiving: () => [
    { name: '', path: paths.receiving, needs: 'samples.read' },
    { name: 'empty', path: `${paths.receiving}?number=S-00-00000`, needs: 'samples.read' },
  ],
  receive: one('samples.receive', () => paths.receive),
  receiveMany: one('samples.receive', () => paths.receiveMany),
  waiting: one('samples.read', () => paths.waiting),
  labels: one('samples.read', ({ sample }) => `${paths.labels}?samples=${sample}`),
  sample: ({ sample, undecidedSample }) => [
    { name: 'reported', path: paths.sample(sample), needs: 'samples.read' },
    { name: 'undecided', path: paths.sample(undecidedSample), needs: 'samples.read' },
    { name: 'missing', path: paths.sample(MISSING), needs: 'samples.read' },
  ],

  bench: one('methods.read', () => paths.bench),
  methods: one('methods.read', () => paths.methods),
  method: one('methods.read', ({ method }) => paths.method(method)),
  programmes: one('programmes.read', () => paths.programmes),
  materials: one('materials.read', () => paths.materials),
  newMaterial: one('materials.manage', () => paths.newMaterial),
  material: one('materials.read', ({ material }) => paths.material(material)),
  instruments: one('instruments.read', () => paths.instruments),
  newInstrument: one('instruments.manage', () => paths.newInstrument),
  instrument: one('instruments.read', ({ instrument }) => paths.instrument(instrument)),
  benchPeople: one('users.read', () => paths.benchPeople),
  clients: one('clients.read', () => paths.clients),
  newClient: one('clients.manage', () => paths.newClient),
  client: one('clients.read', ({ client }) => paths.client(client)),

  calibrations: one('calibrations.read', () => paths.calibrations),
  newCalibration: one('calibrations.prepare', ({ method }) => `${paths.newCalibration}?method=${method}`),
  calibration: ({ draft, submittedCalibration, calibrationInForce }) => [
    { name: 'draft', path: paths.calibration(draft), needs: 'calibrations.read' },
    { name: 'submitted', path: paths.calibration(submittedCalibration), needs: 'calibrations.read' },
    { name: 'in force', path: paths.calibration(calibrationInForce), needs: 'calibrations.read' },
    { name: 'missing', path: paths.calibration(MISSING), needs: 'calibrations.read' },
  ],
  batches: one('batches.read', () => paths.batches),
  newBatch: one('batches.run', ({ method }) => `${paths.newBatch}?method=${method}`),
  batch: ({ openBatch, releasedBatch }) => [
    { name: 'open', path: paths.batch(openBatch), needs: 'batches.read' },
    { name: 'released', path: paths.batch(releasedBatch), needs: 'batches.read' },
  ],
  batchUpload: one('batches.run', ({ openBatch }) => paths.batchUpload(openBatch)),
  review: one('batches.read', () => paths.review),
  reviewBatch: one('batches.read', ({ submittedBatch }) => paths.reviewBatch(submittedBatch)),
  results: one('results.read', () => paths.results),
  result: one('story.read', ({ result }) => paths.result(result)),
  alerts: one('alerts.read', () => paths.alerts),
  alert: one('alerts.read', ({ alert }) => paths.alert(alert)),
  certificates: one('certificates.read', () => paths.certificates),
  certificate: one('certificates.read', ({ certificate }) => paths.certificate(certificate)),

  charts: one('charts.read', ({ method }) => `${paths.charts}?method=${method}`),
  // one chart is chosen on the page of them all
  chart: null,
  history: one('history.read', () => paths.history),
  historySeals: one('history.read', () => paths.historySeals),
  settings: one('laboratory.read', () => paths.settings),
  settingsPeople: one('users.read', () => paths.settingsPeople),
  settingsPerson: one('users.read', ({ person }) => paths.settingsPerson(person)),
  settingsLaboratory: one('laboratory.read', () => paths.settingsLaboratory),
  settingsMail: one('mail.read', () => paths.settingsMail),
  settingsHealth: one('laboratory.read', () => paths.settingsHealth),
  settingsValidation: one('validation.read', () => paths.settingsValidation),

  portal: one('portal.read', () => paths.portal),
  portalResults: one('portal.read', () => paths.portalResults),
  // a client's number opens its certificate
  portalResult: null,
  portalCertificates: one('portal.read', () => paths.portalCertificates),
  portalCertificate: one('portal.read', ({ ownCertificate }) => paths.portalCertificate(ownCertificate)),
  portalPoints: one('portal.read', () => paths.portalPoints),
  portalPoint: one('portal.read', ({ ownPoint }) => paths.portalPoint(ownPoint)),
  portalAlerts: one('portal.read', () => paths.portalAlerts),
  portalAlert: ({ ownAlert }) => [
    { name: '', path: paths.portalAlert(ownAlert), needs: 'portal.read' },
    { name: 'missing', path: paths.portalAlert(MISSING), needs: 'portal.read' },
  ],
}

const kebab = (text: string) => text.replaceAll(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`)

function everyScreen(things: Things): Screen[] {
  return Object.entries(ENTRIES).flatMap(([key, entry]) => {
    if (!entry) return []
    return [entry(things)].flat().map((screen) => ({
      ...screen,
      name: [kebab(key), screen.name.replaceAll(' ', '-')].filter(Boolean).join('-'),
    }))
  })
}

export const publicScreens = (things: Things): Screen[] =>
  everyScreen(things).filter(({ needs }) => needs === 'public')

/** What a role can open. A client has its own pages for alerts and certificates; its account is like everybody's. */
export function screensOf(role: Role, things: Things): Screen[] {
  const actor = { userId: '0', role, clientId: role === 'client' ? '0' : null }
  return everyScreen(things).filter(({ path, needs }) => {
    if (needs === 'public' || !can(actor, needs)) return false
    return role !== 'client' || path.startsWith(paths.portal) || path === paths.account
  })
}

const DUMMY = new Proxy({}, { get: () => '0' }) as Things

/** The first step of an address: the part of the laboratory it belongs to. */
export const areaOf = (screen: Screen): string => screen.path.split(/[/?]/)[1] ?? ''

/** The same before any row is known. */
export const screensUnfilled = (role: Role): Screen[] => screensOf(role, DUMMY)

/** The parts a role can open, known before any row is. */
export function areasOf(role: Role | 'nobody'): string[] {
  const screens = role === 'nobody' ? publicScreens(DUMMY) : screensUnfilled(role)
  return [...new Set(screens.map(areaOf))]
}

/** The newest row of each kind, as an auditor and this client find them. */
export async function findThings(given: { house: Api; own: Api }): Promise<Things> {
  const { house, own } = given
  const first = async (rows: Promise<{ items: readonly { id: string }[] }>, fallback = '0') =>
    (await rows).items[0]?.id ?? fallback
  const certificate = await first(house.call(listCertificates, {}))
  const calibration = await first(house.call(listCalibrations, {}))
  const batch = await first(house.call(listBatches, {}))
  const inState = (state: 'draft' | 'submitted' | 'in-force') =>
    first(house.call(listCalibrations, { query: { state } }), calibration)
  const submitted = house.call(listCalibrations, { query: { state: 'submitted' } })
  const batchIn = (state: 'open' | 'submitted' | 'released') =>
    first(house.call(listBatches, { query: { state } }), batch)
  const sample = await first(house.call(listSamples, { query: { state: 'reported' } }))
  return {
    sample,
    undecidedSample: await first(house.call(listSamples, { query: { state: 'received' } }), sample),
    method:
      (await house.call(listMethods, {})).items.find((each) => each.code === 'fe-phenanthroline')?.id ?? '0',
    material: await first(house.call(listMaterials, { query: { kind: 'working-standard' } })),
    instrument: await first(house.call(listInstruments, {})),
    client: await first(house.call(listClients, {})),
    draft: await inState('draft'),
    // the demonstration's own, the oldest: what tests submit may be the manager's, who cannot sign it
    submittedCalibration: (await submitted).items.at(-1)?.id ?? calibration,
    calibrationInForce: await inState('in-force'),
    openBatch: await batchIn('open'),
    submittedBatch: await batchIn('submitted'),
    releasedBatch: await batchIn('released'),
    result: await first(house.call(listResults, { query: { state: 'released' } })),
    alert: await first(house.call(listAlerts, {})),
    certificate,
    code: (await house.call(getCertificate, { params: { id: certificate } })).snapshot.verificationCode,
    person: await first(house.call(listUsers, {})),
    ownCertificate: await first(own.call(listCertificates, {})),
    ownPoint: (await own.call(portalUtility, {})).points[0]?.id ?? '0',
    ownAlert: await first(own.call(listAlerts, {})),
  }
}

export type { Screen }
