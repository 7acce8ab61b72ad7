import { z } from 'zod'
import { delivery } from './alerts.js'
import {
  id,
  idParams,
  instant,
  pageOf,
  pageQuery,
  person,
  reason,
  signing,
  versioned,
  versionedReason,
} from './common.js'
import { defineEndpoint } from './endpoint.js'

export const certificateState = z.enum(['issued', 'superseded', 'withdrawn'])

/** Frozen at issue: the document is made from this and from nothing else. */
export const certificateSnapshot = z.object({
  number: z.string(),
  title: z.string(),
  issuedAt: instant,
  timeZone: z.string(),
  replaces: z.string().nullable(),
  replacementReason: z.string(),
  changes: z.array(z.object({ what: z.string(), was: z.string(), is: z.string() })),
  laboratory: z.object({
    name: z.string(),
    address: z.string(),
    accreditation: z.string(),
    email: z.string(),
    phone: z.string(),
  }),
  client: z.object({ name: z.string(), address: z.string(), contact: z.string(), systemId: z.string() }),
  sample: z.object({
    number: z.string(),
    point: z.string(),
    pointCode: z.string(),
    purpose: z.string(),
    kind: z.string(),
    collectedAt: instant,
    collectedBy: z.string(),
    receivedAt: instant,
    preservation: z.string(),
    ph: z.string(),
    temperatureC: z.string(),
    condition: z.string(),
    qualification: z.string(),
  }),
  results: z.array(
    z.object({
      resultId: id,
      determination: z.string(),
      method: z.string(),
      edition: z.string(),
      text: z.string(),
      uncertaintyText: z.string(),
      unit: z.string(),
      quantificationLimit: z.string(),
      limitName: z.string(),
      limitValue: z.string(),
      limitUnit: z.string(),
      limitSource: z.string(),
      statement: z.string(),
      decisionRule: z.string(),
      verdict: z.string().nullable(),
      flags: z.array(z.string()),
      analysedAt: instant,
      analyst: z.string(),
      approval: z.string(),
      batch: z.string(),
      calibration: z.string(),
    }),
  ),
  notes: z.array(z.string()),
  reviewedBy: z.string(),
  releasedBy: z.string(),
  releasedByRole: z.string(),
  releasedAt: instant,
  verificationCode: z.string(),
  checkUrl: z.string(),
  caution: z.string(),
  engineVersion: z.string(),
})
export type CertificateSnapshot = z.infer<typeof certificateSnapshot>

export const certificateRow = z.object({
  id,
  number: z.string(),
  state: certificateState,
  clientId: id,
  clientName: z.string(),
  sampleId: id,
  sampleNumber: z.string(),
  pointName: z.string(),
  issuedAt: instant,
  issuedBy: person,
  rendered: z.boolean(),
  mailed: z.boolean(),
  opened: z.boolean(),
  aboveLimit: z.number(),
  version: z.number(),
})
export const certificateView = certificateRow.extend({
  snapshot: certificateSnapshot,
  sha256: z.string().nullable(),
  bytes: z.number().nullable(),
  deliveries: z.array(delivery),
  openings: z.array(z.object({ by: z.string(), at: instant })),
  amends: z.object({ id, number: z.string() }).nullable(),
  amendedBy: z.object({ id, number: z.string() }).nullable(),
  withdrawnReason: z.string(),
})
export type CertificateView = z.infer<typeof certificateView>
export const listCertificates = defineEndpoint({
  name: 'listCertificates',
  summary: 'Certificates, newest first; a client sees its own',
  method: 'GET',
  path: '/certificates',
  permission: 'certificates.read',
  query: pageQuery.extend({
    clientId: id.optional(),
    state: certificateState.optional(),
    number: z.string().max(24).optional(),
  }),
  response: pageOf(certificateRow),
})
export const getCertificate = defineEndpoint({
  name: 'getCertificate',
  summary: 'One certificate beside its data',
  method: 'GET',
  path: '/certificates/:id',
  permission: 'certificates.read',
  params: idParams,
  response: certificateView,
})
export const certificatePdf = defineEndpoint({
  name: 'certificatePdf',
  summary: 'The document as issued',
  method: 'GET',
  path: '/certificates/:id/document.pdf',
  permission: 'certificates.read',
  params: idParams,
  file: ['application/pdf'],
})
export const issueCertificate = defineEndpoint({
  name: 'issueCertificate',
  summary: 'Issue for what is released before every determination is',
  method: 'POST',
  path: '/samples/:id/certificate',
  permission: 'certificates.manage',
  params: idParams,
  body: versioned,
  response: certificateView,
})
export const amendCertificate = defineEndpoint({
  name: 'amendCertificate',
  summary: 'Issue an amendment from the record as it stands now, with what was, is and why',
  method: 'POST',
  path: '/certificates/:id/amend',
  permission: 'certificates.manage',
  params: idParams,
  body: signing.extend({ reason }),
  response: certificateView,
})
export const withdrawCertificate = defineEndpoint({
  name: 'withdrawCertificate',
  summary: 'Withdraw a certificate; its recipients are told',
  method: 'POST',
  path: '/certificates/:id/withdraw',
  permission: 'certificates.manage',
  params: idParams,
  body: versionedReason,
  response: certificateView,
})
export const sendCertificateAgain = defineEndpoint({
  name: 'sendCertificateAgain',
  summary: 'Mail the certificate to its recipients once more',
  method: 'POST',
  path: '/certificates/:id/send-again',
  permission: 'certificates.manage',
  params: idParams,
  response: certificateView,
})
export const checkCertificate = defineEndpoint({
  name: 'checkCertificate',
  summary: 'Public: is this certificate genuine and current? Says nothing of its results',
  method: 'GET',
  path: '/check/:code',
  permission: 'public',
  params: z.object({
    code: z
      .string()
      .trim()
      .toUpperCase()
      .regex(/^[A-Z0-9-]{12,20}$/, 'The code stands at the foot of the certificate.'),
  }),
  response: z.object({
    found: z.boolean(),
    number: z.string().nullable(),
    state: certificateState.nullable(),
    issuedAt: instant.nullable(),
    laboratoryName: z.string().nullable(),
    /** the laboratory's: times on the page are those on the certificate */
    timeZone: z.string().nullable(),
    sha256: z.string().nullable(),
    replacedBy: z.string().nullable(),
  }),
})
export const certificateEndpoints = [
  listCertificates,
  getCertificate,
  certificatePdf,
  issueCertificate,
  amendCertificate,
  withdrawCertificate,
  sendCertificateAgain,
  checkCertificate,
]
