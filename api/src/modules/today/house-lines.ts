import { ANALYTE_NAMES, type todayLine } from '@weirlight/shared/contracts'
import { paths } from '@weirlight/shared/paths'
import type { z } from 'zod'
import type { TodayRepository } from './today.repository.js'

export type TodayLine = z.infer<typeof todayLine>
type Rows<K extends keyof TodayRepository> = Awaited<ReturnType<TodayRepository[K]>>

const due = (at: Date | null, prefix: string) => ({
  at: at?.toISOString() ?? null,
  sense: 'due' as const,
  prefix,
})
const since = (at: Date | null, prefix: string) => ({
  at: at?.toISOString() ?? null,
  sense: 'since' as const,
  prefix,
})
const many = (count: number, one: string, more = `${one}s`) => `${count} ${count === 1 ? one : more}`
const midnight = (day: string) => new Date(`${day}T00:00:00Z`)

export function acceptanceLines(rows: Rows<'samplesToAccept'>): TodayLine[] {
  return rows.map((row) => ({
    key: `sample-${row.id}`,
    kind: 'holding',
    clock: since(row.receivedAt, 'waiting'),
    tone: 'caution',
    title: `Sample ${row.number}, ${row.clientName}`,
    detail: `Received for ${row.purpose === 'compliance' ? 'compliance' : 'operational use'}, not yet accepted.`,
    action: 'Accept or reject',
    to: paths.sample(row.id),
  }))
}

export function holdingLines(rows: Rows<'holdingSoon'>, now: Date): TodayLine[] {
  return rows.map((row) => ({
    key: `holding-${row.methodId}-${row.clientName}`,
    kind: 'holding',
    clock: due(row.dueAt, 'holding time'),
    tone: row.dueAt && row.dueAt < now ? 'above' : 'caution',
    title: `${many(Number(row.waiting), 'determination')} from ${row.clientName}`,
    detail: `${row.methodTitle}. Not in a batch yet.`,
    action: 'Make a batch',
    to: `${paths.newBatch}?method=${row.methodId}`,
  }))
}

export function batchLines(rows: Rows<'batches'>): TodayLine[] {
  return rows.map((row) => ({
    key: `batch-${row.id}`,
    kind: 'batch',
    clock: since(row.openedAt, 'open'),
    tone: row.state === 'returned' ? 'caution' : 'quiet',
    title: `Batch ${row.number}, ${many(Number(row.samples), 'sample')}`,
    detail:
      row.state === 'returned'
        ? `Sent back: ${row.returnedReason}`
        : `${row.methodTitle}. Opened by ${row.openerName}.`,
    action: 'Go on reading',
    to: paths.batch(row.id),
  }))
}

export function reviewLines(
  rows: Rows<'batches'>,
  given: { now: Date; hours: number | null; userId: string },
): TodayLine[] {
  return rows
    .filter((row) => row.submittedBy !== given.userId)
    .map((row) => {
      const dueAt =
        row.submittedAt && given.hours !== null
          ? new Date(row.submittedAt.getTime() + given.hours * 3_600_000)
          : null
      const above = Number(row.above)
      const corrected = Number(row.corrected)
      const detail = [
        above === 0 ? '' : `${many(above, 'result')} above a limit ${above === 1 ? 'is' : 'are'} waiting.`,
        corrected === 0 ? 'No reading was corrected.' : `${many(corrected, 'reading')} corrected by hand.`,
      ]
      return {
        key: `review-${row.id}`,
        kind: 'review',
        clock: dueAt ? due(dueAt, 'review due') : since(row.submittedAt, 'waiting'),
        tone: above > 0 || (dueAt !== null && dueAt < given.now) ? 'above' : 'caution',
        title: `Batch ${row.number}, ${row.methodTitle}, ${many(Number(row.samples), 'sample')}`,
        detail: detail.filter(Boolean).join(' '),
        action: 'Review',
        to: paths.reviewBatch(row.id),
      }
    })
}

export function signingLines(rows: Rows<'calibrations'>, userId: string): TodayLine[] {
  return rows
    .filter((row) => row.preparedBy !== userId)
    .map((row) => {
      const criteria = row.criteria as unknown as { outcome: string }[]
      const failed = criteria.filter((criterion) => criterion.outcome === 'fail').length
      return {
        key: `calibration-${row.id}`,
        kind: 'calibration',
        clock: since(row.submittedAt, 'waiting'),
        tone: failed > 0 ? 'above' : 'caution',
        title: `Calibration ${row.number}, ${row.methodTitle}`,
        detail:
          failed === 0
            ? `Every criterion passes. Prepared by ${row.preparerName}.`
            : `${many(failed, 'criterion fails', 'criteria fail')}. Prepared by ${row.preparerName}.`,
        action: 'Sign or send back',
        to: paths.calibration(row.id),
      }
    })
}

export function ownCalibrationLines(rows: Rows<'calibrations'>, userId: string): TodayLine[] {
  return rows
    .filter((row) => row.preparedBy === userId && (row.state === 'draft' || !row.isCopied))
    .map((row) => ({
      key: `calibration-${row.id}`,
      kind: 'calibration',
      clock: since(row.createdAt, 'begun'),
      tone: row.state === 'draft' ? 'quiet' : 'caution',
      title: `Calibration ${row.number}, ${row.methodTitle}`,
      detail: row.state === 'draft' ? 'Your draft.' : `Sent back: ${row.returnedReason}`,
      action: row.state === 'draft' ? 'Go on' : 'See why',
      to: paths.calibration(row.id),
    }))
}

export function endingLines(rows: Rows<'calibrationsEnding'>, now: Date): TodayLine[] {
  return rows.map((row) => ({
    key: `ending-${row.id}`,
    kind: 'expiry',
    clock: due(row.validUntil, 'ends'),
    tone: row.validUntil && row.validUntil < now ? 'above' : 'quiet',
    title: `Calibration ${row.number} runs out`,
    detail: `${row.methodTitle}, ${row.instrumentName}.`,
    action: 'Open',
    to: paths.calibration(row.id),
  }))
}

export function alertLines(
  rows: Rows<'unansweredAlerts'>,
  given: { now: Date; to: (id: string) => string },
): TodayLine[] {
  return rows.map((row) => ({
    key: `alert-${row.id}`,
    kind: 'alert',
    clock: row.answerDueAt ? due(row.answerDueAt, 'answer due') : since(row.raisedAt, 'unanswered'),
    tone: 'above',
    title: `Alert ${row.number}, ${ANALYTE_NAMES[row.analyte as keyof typeof ANALYTE_NAMES]} ${row.reportedText} ${row.unit.replace('ug', 'µg')}, ${row.pointName}`,
    detail:
      row.state === 'raised'
        ? `${row.clientName}. No contact of the client has been mailed yet.`
        : `${row.clientName}. Mailed, not answered yet.`,
    action: 'Open alert',
    to: given.to(row.id),
  }))
}

export function answeredLines(rows: Rows<'answeredAlerts'>): TodayLine[] {
  return rows.map((row) => ({
    key: `answered-${row.id}`,
    kind: 'alert',
    clock: since(row.acknowledgedAt, 'answered'),
    tone: 'quiet',
    title: `Alert ${row.number}, ${row.clientName}`,
    detail: 'The client has answered. Close it when nothing more is to be done.',
    action: 'Open alert',
    to: paths.alert(row.id),
  }))
}

export function lotLines(rows: Rows<'lotsEnding'>, now: Date): TodayLine[] {
  return rows.map((row) => {
    const isOver = midnight(row.expiresOn) < now
    const inForce = Number(row.inForce)
    return {
      key: `lot-${row.id}`,
      kind: 'expiry',
      clock: due(midnight(row.expiresOn), 'expires'),
      tone: isOver ? 'caution' : 'quiet',
      title: `${row.name} ${row.number} ${isOver ? 'has expired' : 'expires'}`,
      detail:
        inForce === 0
          ? 'No calibration in force stands on it.'
          : `${many(inForce, 'calibration')} in force ${inForce === 1 ? 'stands' : 'stand'} on it.`,
      action: 'See what it touches',
      to: paths.material(row.id),
    }
  })
}

export function checkLines(rows: Rows<'checksDue'>, now: Date): TodayLine[] {
  return rows.map((row) => ({
    key: `check-${row.id}-${row.kind}`,
    kind: 'check',
    clock: due(midnight(row.dueOn), 'check due'),
    tone: midnight(row.dueOn) < now ? 'above' : 'quiet',
    title: `${row.name}: ${row.kind.replace('-', ' ')} check`,
    detail: 'Past its date the instrument carries no readings.',
    action: 'Record the check',
    to: paths.instrument(row.id),
  }))
}

export function mailLines(rows: Rows<'failedMail'>): TodayLine[] {
  return rows.map((row) => ({
    key: `mail-${row.id}`,
    kind: 'mail',
    clock: since(row.failedAt, 'not delivered'),
    tone: 'above',
    title: `Not delivered: ${row.subject}`,
    detail: `To ${row.recipient}. ${row.lastError ?? ''}`.trim(),
    action: 'See the message',
    to: paths.settingsMail,
  }))
}

export function unrenderedLines(rows: Rows<'unrendered'>): TodayLine[] {
  return rows.map((row) => ({
    key: `unrendered-${row.id}`,
    kind: 'certificate',
    clock: since(row.issuedAt, 'waiting'),
    tone: 'above',
    title: `Certificate ${row.number} has no document yet`,
    detail: 'It should have been made by now; it is tried again by itself.',
    action: 'Open',
    to: paths.certificate(row.id),
  }))
}

export function invitedLines(rows: Rows<'invited'>): TodayLine[] {
  return rows.map((row) => ({
    key: `invited-${row.id}`,
    kind: 'person',
    clock: since(row.createdAt, 'invited'),
    tone: 'quiet',
    title: `${row.name} has not accepted the invitation`,
    detail: 'Send it again if the link has run out.',
    action: 'Open',
    to: paths.settingsPeople,
  }))
}

export function newCertificateLines(rows: Rows<'newCertificates'>): TodayLine[] {
  return rows.map((row) => ({
    key: `certificate-${row.id}`,
    kind: 'certificate',
    clock: since(row.issuedAt, 'issued'),
    tone: 'quiet',
    title: `Certificate ${row.number}`,
    detail: `Sample ${row.sampleNumber}. Not opened by you yet.`,
    action: 'Open',
    to: paths.portalCertificate(row.id),
  }))
}
