import type { CertificateSnapshot, CertificateView, certificateRow } from '@weirlight/shared/contracts'
import type { z } from 'zod'
import type { CertificateRecord, CertificatesRepository } from './certificates.repository.js'

type Rows<K extends 'deliveries' | 'openings' | 'neighbours'> = Awaited<ReturnType<CertificatesRepository[K]>>

export const snapshotOf = (row: { snapshot: unknown }) => row.snapshot as CertificateSnapshot

export function toCertificateRow(row: CertificateRecord): z.infer<typeof certificateRow> {
  return {
    id: row.id,
    number: row.number,
    state: row.state as CertificateView['state'],
    clientId: row.clientId,
    clientName: row.clientName,
    sampleId: row.sampleId,
    sampleNumber: row.sampleNumber,
    pointName: row.pointName,
    issuedAt: row.issuedAt.toISOString(),
    issuedBy: { id: row.issuedBy, name: row.issuerName },
    rendered: row.sha256 !== null,
    mailed: Boolean(row.isMailed),
    opened: Boolean(row.isOpened),
    aboveLimit: snapshotOf(row).results.filter(
      (line) => line.verdict === 'above' || line.verdict === 'conditional-above',
    ).length,
    version: row.version,
  }
}

export function toCertificateView(given: {
  row: CertificateRecord
  deliveries: Rows<'deliveries'>
  openings: Rows<'openings'>
  neighbours: Rows<'neighbours'>
  /** a client does not see who else opened it, nor what a mail server said */
  isClient: boolean
}): CertificateView {
  const { row, isClient } = given
  const amends = given.neighbours.find((other) => other.id === row.amendsId)
  const amendedBy = given.neighbours.find((other) => other.amendsId === row.id)
  return {
    ...toCertificateRow(row),
    snapshot: snapshotOf(row),
    sha256: row.sha256,
    bytes: row.bytes,
    deliveries: given.deliveries.map((mail) => ({
      mailId: mail.id,
      to: mail.recipient,
      state: mail.state as 'waiting' | 'sending' | 'sent' | 'failed',
      attempts: mail.attempts,
      sentAt: mail.sentAt?.toISOString() ?? null,
      lastError: isClient ? '' : (mail.lastError ?? ''),
    })),
    openings: isClient
      ? []
      : given.openings.map((opening) => ({ by: opening.by, at: opening.at.toISOString() })),
    amends: amends ? { id: amends.id, number: amends.number } : null,
    amendedBy: amendedBy ? { id: amendedBy.id, number: amendedBy.number } : null,
    withdrawnReason: row.withdrawnReason,
  }
}
