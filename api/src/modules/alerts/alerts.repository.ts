import { Injectable } from '@nestjs/common'
import type { listAlerts, PositionLimit, QueryOf } from '@weirlight/shared/contracts'
import { sql, type ExpressionBuilder } from 'kysely'
import { idFromCursor, notFound, type DB, type Executor, type Trx } from '../../platform/index.js'

export type AlertRecord = Awaited<ReturnType<AlertsRepository['list']>>[number]

/** when the last reading behind the result was taken: “analysed”, for the clocks of laws */
const lastRead = sql<Date | null>`(select max(r.read_at) from position_readings r
  where r.batch_id = results.batch_id and r.position_id = results.position_id)`.as('analysedAt')
const TO_CLIENT = sql<boolean>`key like 'alert:' || alerts.id || ':client:%'`

/** A client reaches its own rows; for everyone else `clientId` is null. */
@Injectable()
export class AlertsRepository {
  private rows(db: Executor) {
    return db
      .selectFrom('alerts')
      .innerJoin('results', 'results.id', 'alerts.resultId')
      .innerJoin('samples', 'samples.id', 'results.sampleId')
      .innerJoin('clients', 'clients.id', 'alerts.clientId')
      .innerJoin('samplingPoints', 'samplingPoints.id', 'results.samplingPointId')
      .leftJoin('users as answerer', 'answerer.id', 'alerts.acknowledgedBy')
      .leftJoin('users as closer', 'closer.id', 'alerts.closedBy')
      .select((eb) => [
        'alerts.id',
        'alerts.number',
        'alerts.state',
        'alerts.clientId',
        'alerts.resultId',
        'alerts.raisedAt',
        'alerts.notifiedAt',
        'alerts.answerDueAt',
        'alerts.acknowledgedAt',
        'alerts.acknowledgedBy',
        'alerts.acknowledgement',
        'alerts.closedAt',
        'alerts.closedBy',
        'alerts.closingNote',
        'alerts.version',
        'clients.name as clientName',
        'clients.agencyName',
        'clients.agencyPhone',
        'samples.id as sampleId',
        'samples.number as sampleNumber',
        'samples.receivedAt',
        'samplingPoints.id as pointId',
        'samplingPoints.name as pointName',
        'results.analyte',
        'results.form',
        'results.reportedText',
        'results.uncertaintyText',
        'results.unit',
        eb.fn.coalesce('alerts.limitSnapshot', 'results.limitSnapshot').as('limitSnapshot'),
        'results.collectedAt',
        'results.measuredAt',
        'results.releasedAt',
        lastRead,
        'answerer.name as answererName',
        'closer.name as closerName',
      ])
  }

  async list(db: Executor, { after, limit, state, clientId }: QueryOf<typeof listAlerts>) {
    const before = idFromCursor(after)
    return this.rows(db)
      .$if(before !== undefined, (query) => query.where('alerts.id', '<', before ?? ''))
      .$if(state !== undefined, (query) => query.where('alerts.state', '=', state ?? ''))
      .$if(clientId !== undefined, (query) => query.where('alerts.clientId', '=', clientId ?? ''))
      .orderBy('alerts.id', 'desc')
      .limit(limit + 1)
      .execute()
  }

  async find(db: Executor, { id, clientId }: { id: string; clientId: string | null }) {
    return this.rows(db)
      .where('alerts.id', '=', id)
      .$if(clientId !== null, (query) => query.where('alerts.clientId', '=', clientId ?? ''))
      .executeTakeFirst()
  }

  async lock(trx: Trx, { id, clientId }: { id: string; clientId: string | null }) {
    const row = await trx
      .selectFrom('alerts')
      .select(['id', 'state', 'version', 'clientId'])
      .where('id', '=', id)
      .$if(clientId !== null, (query) => query.where('clientId', '=', clientId ?? ''))
      .forUpdate()
      .executeTakeFirst()
    if (!row) throw notFound('alert')
    return row
  }

  /** Released results above a limit, without an alert yet. */
  async toRaise(trx: Trx, resultIds: readonly string[]) {
    if (resultIds.length === 0) return []
    return trx
      .selectFrom('results')
      .select(['results.id', 'results.clientId', 'results.limitSnapshot', 'results.inputs'])
      .where('results.id', 'in', [...resultIds])
      .where('results.verdict', 'in', ['above', 'conditional-above'])
      .where((eb) =>
        eb.not(
          eb.exists(
            eb.selectFrom('alerts').whereRef('alerts.resultId', '=', 'results.id').select('alerts.id'),
          ),
        ),
      )
      .orderBy('results.id')
      .execute()
  }

  /** Which of these limits raise alerts. */
  async raising(db: Executor, limitIds: readonly string[]): Promise<Set<string>> {
    if (limitIds.length === 0) return new Set()
    const rows = await db
      .selectFrom('limits')
      .select('id')
      .where('id', 'in', [...limitIds])
      .where('raisesAlert', '=', true)
      .execute()
    return new Set(rows.map(({ id }) => id))
  }

  async insert(trx: Trx, row: { clientId: string; resultId: string; limit: PositionLimit }): Promise<string> {
    const { limit, ...columns } = row
    const { id } = await trx
      .insertInto('alerts')
      .values({
        ...columns,
        limitId: limit.id,
        limitSnapshot: JSON.stringify(limit),
        number: sql<string>`next_number('A', 'alert_numbers', 4)`,
      })
      .returning('id')
      .executeTakeFirstOrThrow()
    return id
  }

  async notify(
    trx: Trx,
    { id, at, answerHours }: { id: string; at: Date; answerHours: number | null },
  ): Promise<void> {
    await trx
      .updateTable('alerts')
      .set((eb) => ({
        state: 'notified',
        notifiedAt: at,
        answerDueAt:
          answerHours === null
            ? null
            : sql<Date>`weirlight_now() + make_interval(secs => ${answerHours * 3600}::float8)`,
        version: eb('version', '+', 1),
      }))
      .where('id', '=', id)
      .execute()
  }

  async acknowledge(
    trx: Trx,
    { id, userId, at, text }: { id: string; userId: string; at: Date; text: string },
  ): Promise<void> {
    await trx
      .updateTable('alerts')
      .set((eb) => ({
        state: 'acknowledged',
        acknowledgedBy: userId,
        acknowledgedAt: at,
        acknowledgement: text,
        version: eb('version', '+', 1),
      }))
      .where('id', '=', id)
      .execute()
  }

  async end(
    trx: Trx,
    {
      id,
      state,
      userId,
      at,
      text,
    }: { id: string; state: 'closed' | 'cancelled'; userId: string; at: Date; text: string },
  ): Promise<void> {
    await trx
      .updateTable('alerts')
      .set((eb) => ({
        state,
        closedBy: userId,
        closedAt: at,
        closingNote: text,
        version: eb('version', '+', 1),
      }))
      .where('id', '=', id)
      .execute()
  }

  /** Raised, and a message to the client has left: the listener died before it could say so. */
  async leftUnsaid(db: Executor): Promise<string[]> {
    const rows = await db
      .selectFrom('alerts')
      .select('alerts.id')
      .where('alerts.state', '=', 'raised')
      .where(this.clientWasMailed)
      .limit(100)
      .execute()
    return rows.map((row) => row.id)
  }

  /** The laboratory's own copies tell the client nothing. */
  async isClientMailed(db: Executor, id: string): Promise<boolean> {
    const row = await db
      .selectFrom('alerts')
      .select('alerts.id')
      .where('alerts.id', '=', id)
      .where(this.clientWasMailed)
      .executeTakeFirst()
    return row !== undefined
  }

  private readonly clientWasMailed = (eb: ExpressionBuilder<DB, 'alerts'>) =>
    eb.exists(
      eb
        .selectFrom('mailMessages')
        .where('mailMessages.aboutKind', '=', 'alert')
        .whereRef('mailMessages.aboutId', '=', 'alerts.id')
        .where('mailMessages.state', '=', 'sent')
        .where(TO_CLIENT)
        .select('mailMessages.id'),
    )

  async recipients(db: Executor, clientId: string) {
    const contacts = await db
      .selectFrom('contacts')
      .select(['name', 'email'])
      .where('clientId', '=', clientId)
      .where('active', '=', true)
      .where('getsAlerts', '=', true)
      .orderBy('id')
      .execute()
    const managers = await db
      .selectFrom('users')
      .select(['name', 'email'])
      .where('role', '=', 'qa-manager')
      .where('status', '=', 'active')
      .orderBy('id')
      .execute()
    return { contacts, managers }
  }

  async deliveries(db: Executor, about: { kind: string; id: string }) {
    return db
      .selectFrom('mailMessages')
      .select(['id', 'recipient', 'state', 'attempts', 'sentAt', 'lastError', 'key'])
      .where('aboutKind', '=', about.kind)
      .where('aboutId', '=', about.id)
      .orderBy('id')
      .execute()
  }

  async earlier(db: Executor, given: { pointId: string; analyte: string; form: string; before: Date }) {
    return db
      .selectFrom('results')
      .select(['collectedAt', 'reportedText', 'unit', 'verdict'])
      .where('samplingPointId', '=', given.pointId)
      .where('analyte', '=', given.analyte)
      .where('form', '=', given.form)
      .where('state', '=', 'released')
      .where('collectedAt', '<', given.before)
      .orderBy('collectedAt', 'desc')
      .limit(12)
      .execute()
  }

  /** Duties of the client's programme and of the house, as data with their sources. */
  async clocks(db: Executor, clientId: string) {
    return db
      .selectFrom('clocks')
      .selectAll()
      .where((eb) =>
        eb.or([
          eb('code', 'like', 'house-%'),
          eb(
            'code',
            'in',
            sql<string>`(select jsonb_array_elements_text(p.definition -> 'clocks') from programmes p join clients c on c.programme_id = p.id where c.id = ${clientId})`,
          ),
        ]),
      )
      .where('code', '!=', 'house-review')
      .orderBy('hours')
      .execute()
  }

  async answerHours(db: Executor): Promise<number | null> {
    const row = await db
      .selectFrom('clocks')
      .select('hours')
      .where('code', '=', 'house-acknowledge')
      .executeTakeFirst()
    return row ? Number(row.hours) : null
  }
}
