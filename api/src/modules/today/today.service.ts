import { Injectable } from '@nestjs/common'
import type { getToday, goTo, QueryOf } from '@weirlight/shared/contracts'
import { paths } from '@weirlight/shared/paths'
import type { Actor } from '@weirlight/shared/permissions'
import { Clock, Database, type AnswerOf } from '../../platform/index.js'
import * as say from './house-lines.js'
import { missingLines } from './missing-lines.js'
import { TodayRepository } from './today.repository.js'

const LINES_SHOWN = 40
/** how far ahead Today looks; what runs out later needs nobody yet */
const AHEAD = { holdingHours: 72, lotDays: 14, checkDays: 7, calibrationDays: 3, documentMinutes: 5 }

type Today = AnswerOf<typeof getToday>

const PAGES: Record<string, (id: string) => string> = {
  sample: paths.sample,
  calibration: paths.calibration,
  batch: paths.batch,
  certificate: paths.certificate,
  alert: paths.alert,
  lot: paths.material,
  instrument: paths.instrument,
}

@Injectable()
export class TodayService {
  constructor(
    private readonly db: Database,
    private readonly clock: Clock,
    private readonly rows: TodayRepository,
  ) {}

  async today(actor: Actor): Promise<Today> {
    const now = this.clock.now()
    const [lines, facts, counts] = await Promise.all([
      this.linesFor(actor, now),
      this.factsFor(actor),
      this.rows.counts(this.db.read, actor.clientId),
    ])
    return {
      now: now.toISOString(),
      lines: lines.sort((a, b) => order(a, now) - order(b, now)).slice(0, LINES_SHOWN),
      facts,
      counts:
        actor.role === 'client'
          ? { receiving: 0, review: 0, calibrations: 0, batches: 0, alerts: counts.alerts }
          : counts,
    }
  }

  async goTo({ number }: QueryOf<typeof goTo>): Promise<AnswerOf<typeof goTo>> {
    const wanted = number.toUpperCase().replace(/[%_\\]/g, '')
    if (wanted === '') return { hits: [] }
    // a bare number is the end of one: 4117 finds S-26-04117
    const pattern = /^\d+$/.test(wanted) ? `%${wanted}` : `${wanted}%`
    const hits = await this.rows.byNumber(this.db.read, pattern)
    return { hits: hits.map((hit) => ({ ...hit, to: PAGES[hit.kind]?.(hit.id) ?? paths.today })) }
  }

  private async linesFor(actor: Actor, now: Date): Promise<say.TodayLine[]> {
    switch (actor.role) {
      case 'client':
        return this.clientLines(actor, now)
      case 'technician':
        return this.benchLines(actor, now)
      case 'qa-manager':
        return (await Promise.all([this.qaLines(actor, now), this.benchLines(actor, now)])).flat()
      case 'administrator':
        return [
          ...say.mailLines(await this.rows.failedMail(this.db.read)),
          ...say.unrenderedLines(await this.rows.unrendered(this.db.read, AHEAD.documentMinutes)),
          ...say.invitedLines(await this.rows.invited(this.db.read)),
          ...missingLines(await this.rows.missing(this.db.read), 'people'),
        ]
      case 'auditor':
        return say.alertLines(await this.rows.unansweredAlerts(this.db.read, null), { now, to: paths.alert })
    }
  }

  private async benchLines(actor: Actor, now: Date): Promise<say.TodayLine[]> {
    const db = this.db.read
    const [samples, holding, batches, own, ending, lots, checks, missing] = await Promise.all([
      this.rows.samplesToAccept(db),
      this.rows.holdingSoon(db, AHEAD.holdingHours),
      this.rows.batches(db, ['open', 'returned']),
      this.rows.calibrations(db, ['draft', 'rejected']),
      this.rows.calibrationsEnding(db, AHEAD.calibrationDays),
      this.rows.lotsEnding(db, AHEAD.lotDays),
      this.rows.checksDue(db, AHEAD.checkDays),
      this.rows.missing(db),
    ])
    return [
      ...say.acceptanceLines(samples),
      ...say.holdingLines(holding, now),
      ...say.batchLines(batches),
      ...say.ownCalibrationLines(own, actor.userId),
      ...say.endingLines(ending, now),
      ...say.lotLines(lots, now),
      ...say.checkLines(checks, now),
      ...missingLines(missing, 'bench'),
    ]
  }

  private async qaLines(actor: Actor, now: Date): Promise<say.TodayLine[]> {
    const db = this.db.read
    const [review, hours, signing, alerts, answered, mail, unrendered, missing] = await Promise.all([
      this.rows.batches(db, ['submitted']),
      this.rows.reviewHours(db),
      this.rows.calibrations(db, ['submitted']),
      this.rows.unansweredAlerts(db, null),
      this.rows.answeredAlerts(db),
      this.rows.failedMail(db),
      this.rows.unrendered(db, AHEAD.documentMinutes),
      this.rows.missing(db),
    ])
    return [
      ...say.reviewLines(review, { now, hours, userId: actor.userId }),
      ...say.signingLines(signing, actor.userId),
      ...say.alertLines(alerts, { now, to: paths.alert }),
      ...say.answeredLines(answered),
      ...say.mailLines(mail),
      ...say.unrenderedLines(unrendered),
      ...missingLines(missing, 'rules'),
    ]
  }

  private async clientLines(actor: Actor, now: Date): Promise<say.TodayLine[]> {
    const { clientId, userId } = actor
    if (clientId === null) return []
    const [alerts, certificates] = await Promise.all([
      this.rows.unansweredAlerts(this.db.read, clientId),
      this.rows.newCertificates(this.db.read, { clientId, userId }),
    ])
    return [
      ...say.alertLines(alerts, { now, to: paths.portalAlert }),
      ...say.newCertificateLines(certificates),
    ]
  }

  private async factsFor(actor: Actor): Promise<Today['facts']> {
    if (actor.role === 'client') return []
    const [counts, mail, seal] = await Promise.all([
      this.rows.counts(this.db.read, null),
      this.rows.mailToday(this.db.read),
      this.rows.lastSeal(this.db.read),
    ])
    const left = mail.waiting + mail.failed
    return [
      {
        heading: 'The bench right now',
        text: `${counts.batches} ${counts.batches === 1 ? 'batch' : 'batches'} open, ${counts.waiting} ${counts.waiting === 1 ? 'determination' : 'determinations'} waiting`,
      },
      {
        heading: 'Mail of the last 24 hours',
        text:
          mail.sent + left === 0
            ? 'No messages'
            : left === 0
              ? mail.sent === 1
                ? 'The one message left the house'
                : `All ${mail.sent} messages left the house`
              : `${mail.sent} left, ${mail.waiting} waiting, ${mail.failed} not delivered`,
      },
      ...(seal
        ? [
            {
              heading: 'History is sealed',
              text: `Head ${seal.head.slice(0, 4)}·${seal.head.slice(4, 8)}·${seal.head.slice(8, 12)}`,
            },
          ]
        : []),
    ]
  }
}

const WEIGHT = { above: 0, caution: 1, quiet: 2 } as const

/** What runs out first comes first; what only waits stands behind, the loud before the quiet. */
function order(line: say.TodayLine, now: Date): number {
  if (line.clock.sense === 'due' && line.clock.at !== null)
    return new Date(line.clock.at).getTime() - now.getTime()
  const waited = line.clock.at === null ? 0 : now.getTime() - new Date(line.clock.at).getTime()
  // waiting things stand as if due in a day for each step of loudness, sooner the longer they have waited
  return (WEIGHT[line.tone] + 1) * 86_400_000 - Math.min(waited, 86_400_000)
}
