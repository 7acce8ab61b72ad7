import type { AlertView, alertRow, PositionLimit } from '@weirlight/shared/contracts'
import type { z } from 'zod'
import { CAUTION } from '../results/index.js'
import type { AlertRecord, AlertsRepository } from './alerts.repository.js'

type Rows<K extends 'deliveries' | 'earlier' | 'clocks'> = Awaited<ReturnType<AlertsRepository[K]>>
const iso = (at: Date | null) => at?.toISOString() ?? null
const limitOf = (row: AlertRecord) => row.limitSnapshot as unknown as PositionLimit | null

export function toAlertRow(row: AlertRecord): z.infer<typeof alertRow> {
  const limit = limitOf(row)
  return {
    id: row.id,
    number: row.number,
    state: row.state as AlertView['state'],
    clientId: row.clientId,
    clientName: row.clientName,
    sampleId: row.sampleId,
    sampleNumber: row.sampleNumber,
    pointName: row.pointName,
    analyte: row.analyte as AlertView['analyte'],
    form: row.form as AlertView['form'],
    text: row.reportedText,
    unit: row.unit,
    limitName: limit?.name ?? '',
    limitValue: limit?.value ?? '',
    limitUnit: limit?.unit ?? '',
    raisedAt: row.raisedAt.toISOString(),
    notifiedAt: iso(row.notifiedAt),
    acknowledgedAt: iso(row.acknowledgedAt),
    resultId: row.resultId,
    answerDueAt: iso(row.answerDueAt),
    version: row.version,
  }
}

export function toAlertView(given: {
  row: AlertRecord
  deliveries: Rows<'deliveries'>
  earlier: Rows<'earlier'>
  clocks: Rows<'clocks'>
  /** a client sees who of its own was told, not the laboratory's people */
  isClient: boolean
}): AlertView {
  const { row, isClient } = given
  const limit = limitOf(row)
  return {
    ...toAlertRow(row),
    uncertaintyText: row.uncertaintyText === '' ? null : row.uncertaintyText,
    limitKind: limit?.kind ?? '',
    limitSource: limit?.source ?? '',
    decisionRule: limit?.rule ?? '',
    collectedAt: row.collectedAt.toISOString(),
    releasedAt: (row.releasedAt ?? row.measuredAt).toISOString(),
    acknowledgedBy: row.acknowledgedBy ? { id: row.acknowledgedBy, name: row.answererName ?? '' } : null,
    acknowledgement: row.acknowledgement,
    closedBy: row.closedBy ? { id: row.closedBy, name: row.closerName ?? '' } : null,
    closedAt: iso(row.closedAt),
    closingNote: row.closingNote,
    deliveries: given.deliveries
      .filter((mail) => !isClient || !mail.key.includes(':house:'))
      .map((mail) => ({
        mailId: mail.id,
        to: mail.recipient,
        state: mail.state as 'waiting' | 'sending' | 'sent' | 'failed',
        attempts: mail.attempts,
        sentAt: iso(mail.sentAt),
        lastError: isClient ? '' : (mail.lastError ?? ''),
      })),
    clocks: given.clocks
      .filter((clock) => appliesTo(clock.appliesTo, limit?.kind ?? ''))
      .map((clock) => ({
        duty: clock.who === '' ? clock.duty : `${clock.duty} (${clock.who})`,
        jurisdiction: clock.jurisdiction,
        dueAt: dueAt(clock, row),
        source: `${clock.source}, ${clock.edition}`,
      })),
    agencyName: row.agencyName,
    agencyPhone: row.agencyPhone,
    earlier: given.earlier.map((one) => ({
      at: one.collectedAt.toISOString(),
      text: one.reportedText,
      verdict: one.verdict,
    })),
    caution: CAUTION,
  }
}

const appliesTo = (rule: string, kind: string) => rule === 'any' || rule === kind

/** A clock runs from the event its rule names; an event that has not happened starts none. */
function dueAt(clock: Rows<'clocks'>[number], row: AlertRecord): string | null {
  const starts: Record<string, Date | null> = {
    collected: row.collectedAt,
    received: row.receivedAt,
    analysed: row.analysedAt ?? row.measuredAt,
    released: row.releasedAt,
    notified: row.notifiedAt,
  }
  const start = starts[clock.startingEvent] ?? null
  return start ? new Date(start.getTime() + Number(clock.hours) * 3_600_000).toISOString() : null
}
