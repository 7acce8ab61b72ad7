import { Injectable, type OnModuleInit } from '@nestjs/common'
import type {
  acknowledgeAlert,
  AlertView,
  BodyOf,
  closeAlert,
  listAlerts,
  PositionLimit,
  QueryOf,
} from '@weirlight/shared/contracts'
import { paths } from '@weirlight/shared/paths'
import type { Actor } from '@weirlight/shared/permissions'
import { alertStates, type AlertState } from '@weirlight/shared/states'
import {
  assertVersion,
  Clock,
  Database,
  HandlesEvent,
  JobHandler,
  MailService,
  notFound,
  Settings,
  SYSTEM,
  toPage,
  type AnswerOf,
  type Executor,
  type Trx,
} from '../../platform/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { batchReleased, recompute, type ResultInputs } from '../results/index.js'
import { toAlertRow, toAlertView } from './alert-view.js'
import { AlertsRepository } from './alerts.repository.js'
import { sweepAlerts } from './jobs/alerts.jobs.js'
import { alertMail, cancelledAlertMail } from './mails/alert-mail.js'

/** A released result above a limit: raised with the release, mailed, answered by the client, closed by the laboratory. */
@Injectable()
export class AlertsService implements OnModuleInit {
  constructor(
    private readonly db: Database,
    private readonly clock: Clock,
    private readonly mail: MailService,
    private readonly settings: Settings,
    private readonly laboratory: LaboratoryService,
    private readonly alerts: AlertsRepository,
  ) {}

  onModuleInit(): void {
    this.mail.whenSent('alert', (id) => this.markNotified(id))
  }

  async list(actor: Actor, query: QueryOf<typeof listAlerts>): Promise<AnswerOf<typeof listAlerts>> {
    const scoped = actor.role === 'client' ? { ...query, clientId: actor.clientId ?? '0' } : query
    const rows = await this.alerts.list(this.db.read, scoped)
    return toPage(rows, { limit: query.limit, key: (row) => [row.id], item: toAlertRow })
  }

  async get(actor: Actor, id: string): Promise<AlertView> {
    return this.view(this.db.read, { id, clientId: actor.clientId, isClient: actor.role === 'client' })
  }

  @HandlesEvent(batchReleased)
  async raise(trx: Trx, { resultIds }: { resultIds: string[] }): Promise<void> {
    for (const { clientId, resultId, limit } of await this.findings(trx, resultIds)) {
      const id = await this.alerts.insert(trx, { clientId, resultId, limit })
      await this.tell(trx, id)
      // the demonstration's past keeps its messages as sent: nothing will come back to say so
      if (this.clock.pinnedAt) await this.notify(trx, id)
    }
  }

  /** Each result above a limit that raises alerts, with that limit: it may be another than the one reported against. */
  private async findings(
    trx: Trx,
    resultIds: string[],
  ): Promise<{ clientId: string; resultId: string; limit: PositionLimit }[]> {
    const results = (await this.alerts.toRaise(trx, resultIds)).map((row) => ({
      ...row,
      inputs: row.inputs as unknown as ResultInputs,
      shown: row.limitSnapshot as unknown as PositionLimit | null,
    }))
    const raising = await this.alerts.raising(trx, [
      ...new Set(results.flatMap(({ inputs }) => inputs.limits.map(({ id }) => id))),
    ])
    return results.flatMap(({ id, clientId, inputs, shown }) => {
      if (shown && raising.has(shown.id)) return [{ clientId, resultId: id, limit: shown }]
      const limits = inputs.limits.filter((limit) => raising.has(limit.id))
      const { verdict, limit } = recompute({ ...inputs, limits })
      const isAbove = verdict === 'above' || verdict === 'conditional-above'
      return isAbove && limit ? [{ clientId, resultId: id, limit }] : []
    })
  }

  async acknowledge(actor: Actor, id: string, body: BodyOf<typeof acknowledgeAlert>): Promise<AlertView> {
    return this.db.transaction(
      actor,
      'alert.acknowledge',
      body.note === '' ? null : body.note,
      async (trx) => {
        const row = await this.alerts.lock(trx, { id, clientId: actor.clientId })
        await assertVersion(trx, { thing: 'alerts', id, has: row.version, sent: body.version })
        alertStates.move(row.state as AlertState, 'acknowledge')
        await this.alerts.acknowledge(trx, {
          id,
          userId: actor.userId,
          at: this.clock.now(),
          text: body.note,
        })
        return this.view(trx, { id, clientId: actor.clientId, isClient: true })
      },
    )
  }

  async close(actor: Actor, id: string, body: BodyOf<typeof closeAlert>): Promise<AlertView> {
    return this.end(actor, { id, body, move: 'close' })
  }

  async cancel(actor: Actor, id: string, body: BodyOf<typeof closeAlert>): Promise<AlertView> {
    return this.end(actor, { id, body, move: 'cancel' })
  }

  @JobHandler(sweepAlerts)
  async sweep(): Promise<void> {
    for (const id of await this.alerts.leftUnsaid(this.db.fresh)) await this.markNotified(id)
  }

  private async end(
    actor: Actor,
    { id, body, move }: { id: string; body: BodyOf<typeof closeAlert>; move: 'close' | 'cancel' },
  ): Promise<AlertView> {
    return this.db.transaction(actor, `alert.${move}`, body.reason, async (trx) => {
      const row = await this.alerts.lock(trx, { id, clientId: null })
      await assertVersion(trx, { thing: 'alerts', id, has: row.version, sent: body.version })
      const state = alertStates.move(row.state as AlertState, move) as 'closed' | 'cancelled'
      await this.alerts.end(trx, { id, state, userId: actor.userId, at: this.clock.now(), text: body.reason })
      const view = await this.view(trx, { id, clientId: null, isClient: false })
      if (move === 'cancel') await this.tellCancelled(trx, view, body.reason)
      return view
    })
  }

  private async markNotified(id: string): Promise<void> {
    await this.db.transaction(SYSTEM, 'alert.notify', null, async (trx) => {
      if (await this.alerts.isClientMailed(trx, id)) await this.notify(trx, id)
    })
  }

  private async notify(trx: Trx, id: string): Promise<void> {
    const row = await this.alerts.lock(trx, { id, clientId: null })
    if (!alertStates.may(row.state as AlertState, 'notify')) return
    await this.alerts.notify(trx, {
      id,
      at: this.clock.now(),
      answerHours: await this.alerts.answerHours(trx),
    })
  }

  private async tell(trx: Trx, id: string): Promise<void> {
    const alert = await this.view(trx, { id, clientId: null, isClient: false })
    const { name, phone, timeZone } = await this.laboratory.get(trx)
    const { contacts, managers } = await this.alerts.recipients(trx, alert.clientId)
    const seen = new Set<string>()
    const addressed = [
      ...contacts.map((one) => ({ ...one, side: 'client', link: paths.portalAlert(id) })),
      ...managers.map((one) => ({ ...one, side: 'house', link: paths.alert(id) })),
    ]
    for (const { email, side, link } of addressed) {
      if (seen.has(email)) continue
      seen.add(email)
      const mail = alertMail({
        alert,
        timeZone,
        laboratory: { name, phone },
        link: new URL(link, this.settings.publicUrl).href,
      })
      await this.mail.queue(trx, {
        key: `alert:${id}:${side}:${email}`,
        to: email,
        ...mail,
        about: { kind: 'alert', id },
        clientId: alert.clientId,
      })
    }
  }

  private async tellCancelled(trx: Trx, alert: AlertView, reason: string): Promise<void> {
    const laboratory = await this.laboratory.get(trx)
    for (const email of new Set(alert.deliveries.map((delivery) => delivery.to))) {
      await this.mail.queue(trx, {
        key: `alert-cancelled:${alert.id}:${email}`,
        to: email,
        ...cancelledAlertMail({ alert, laboratory, reason }),
        about: { kind: 'cancelled-alert', id: alert.id },
        clientId: alert.clientId,
      })
    }
  }

  private async view(
    db: Executor,
    { id, clientId, isClient }: { id: string; clientId: string | null; isClient: boolean },
  ): Promise<AlertView> {
    const row = await this.alerts.find(db, { id, clientId })
    if (!row) throw notFound('alert')
    const [deliveries, earlier, clocks] = [
      await this.alerts.deliveries(db, { kind: 'alert', id }),
      await this.alerts.earlier(db, {
        pointId: row.pointId,
        analyte: row.analyte,
        form: row.form,
        before: row.collectedAt,
      }),
      await this.alerts.clocks(db, row.clientId),
    ]
    return toAlertView({ row, deliveries, earlier, clocks, isClient })
  }
}
