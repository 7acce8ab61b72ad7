import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor } from '../../platform/index.js'

/** Read across the record; nothing is written here. Each list is short by its index and its limit. */
@Injectable()
export class TodayRepository {
  async samplesToAccept(db: Executor) {
    return db
      .selectFrom('samples')
      .innerJoin('clients', 'clients.id', 'samples.clientId')
      .select([
        'samples.id',
        'samples.number',
        'samples.receivedAt',
        'clients.name as clientName',
        'samples.purpose',
      ])
      .where('samples.state', '=', 'received')
      .orderBy('samples.receivedAt')
      .limit(20)
      .execute()
  }

  /** Determinations waiting whose holding time runs out within so many hours, by client and method. */
  async holdingSoon(db: Executor, hours: number) {
    return db
      .selectFrom('determinations')
      .innerJoin('methods', 'methods.id', 'determinations.methodId')
      .innerJoin('clients', 'clients.id', 'determinations.clientId')
      .select((eb) => [
        'methods.id as methodId',
        'methods.title as methodTitle',
        'clients.name as clientName',
        eb.fn.countAll<string>().as('waiting'),
        eb.fn.min('determinations.holdingDueAt').as('dueAt'),
      ])
      .where('determinations.state', '=', 'requested')
      .where(
        'determinations.holdingDueAt',
        '<',
        sql<Date>`weirlight_now() + make_interval(hours => ${hours}::int)`,
      )
      .groupBy(['methods.id', 'methods.title', 'clients.name'])
      .orderBy('dueAt')
      .limit(20)
      .execute()
  }

  async batches(db: Executor, states: readonly ('open' | 'returned' | 'submitted')[]) {
    return db
      .selectFrom('batches')
      .innerJoin('methods', 'methods.id', 'batches.methodId')
      .innerJoin('users as opener', 'opener.id', 'batches.openedBy')
      .select((eb) => [
        'batches.id',
        'batches.number',
        'batches.state',
        'batches.openedBy',
        'batches.submittedBy',
        'batches.openedAt',
        'batches.submittedAt',
        'batches.returnedReason',
        'methods.title as methodTitle',
        'opener.name as openerName',
        eb
          .selectFrom('positions')
          .whereRef('positions.batchId', '=', 'batches.id')
          .where('positions.kind', '=', 'sample')
          .select((count) => count.fn.countAll<string>().as('n'))
          .as('samples'),
        eb
          .selectFrom('results')
          .whereRef('results.batchId', '=', 'batches.id')
          .where('results.verdict', 'in', ['above', 'conditional-above'])
          .select((count) => count.fn.countAll<string>().as('n'))
          .as('above'),
        eb
          .selectFrom('positionReadings')
          .whereRef('positionReadings.batchId', '=', 'batches.id')
          .where('positionReadings.supersedesId', 'is not', null)
          .select((count) => count.fn.countAll<string>().as('n'))
          .as('corrected'),
      ])
      .where('batches.state', 'in', [...states])
      .orderBy('batches.id')
      .limit(30)
      .execute()
  }

  async calibrations(db: Executor, states: readonly ('draft' | 'submitted' | 'rejected')[]) {
    return db
      .selectFrom('calibrations')
      .innerJoin('methods', 'methods.id', 'calibrations.methodId')
      .innerJoin('users as preparer', 'preparer.id', 'calibrations.preparedBy')
      .select((eb) => [
        'calibrations.id',
        'calibrations.number',
        'calibrations.state',
        'calibrations.preparedBy',
        'calibrations.submittedAt',
        'calibrations.createdAt',
        'calibrations.returnedReason',
        'calibrations.criteria',
        'methods.title as methodTitle',
        'preparer.name as preparerName',
        eb
          .exists(
            eb
              .selectFrom('calibrations as copy')
              .whereRef('copy.copiedFrom', '=', 'calibrations.id')
              .select('copy.id'),
          )
          .as('isCopied'),
      ])
      .where('calibrations.state', 'in', [...states])
      .orderBy('calibrations.id', 'desc')
      .limit(30)
      .execute()
  }

  async calibrationsEnding(db: Executor, days: number) {
    return db
      .selectFrom('calibrations')
      .innerJoin('methods', 'methods.id', 'calibrations.methodId')
      .innerJoin('instruments', 'instruments.id', 'calibrations.instrumentId')
      .select([
        'calibrations.id',
        'calibrations.number',
        'calibrations.validUntil',
        'methods.title as methodTitle',
        'instruments.name as instrumentName',
      ])
      .where('calibrations.state', '=', 'in-force')
      .where('calibrations.validUntil', '<', sql<Date>`weirlight_now() + make_interval(days => ${days}::int)`)
      .orderBy('calibrations.validUntil')
      .limit(20)
      .execute()
  }

  async unansweredAlerts(db: Executor, clientId: string | null) {
    return db
      .selectFrom('alerts')
      .innerJoin('results', 'results.id', 'alerts.resultId')
      .innerJoin('clients', 'clients.id', 'alerts.clientId')
      .innerJoin('samplingPoints', 'samplingPoints.id', 'results.samplingPointId')
      .select([
        'alerts.id',
        'alerts.number',
        'alerts.state',
        'alerts.raisedAt',
        'alerts.notifiedAt',
        'alerts.answerDueAt',
        'clients.name as clientName',
        'samplingPoints.name as pointName',
        'results.analyte',
        'results.reportedText',
        'results.unit',
      ])
      .where('alerts.state', 'in', ['raised', 'notified'])
      .$if(clientId !== null, (query) => query.where('alerts.clientId', '=', clientId ?? ''))
      .orderBy('alerts.raisedAt')
      .limit(30)
      .execute()
  }

  async answeredAlerts(db: Executor) {
    return db
      .selectFrom('alerts')
      .innerJoin('clients', 'clients.id', 'alerts.clientId')
      .select(['alerts.id', 'alerts.number', 'alerts.acknowledgedAt', 'clients.name as clientName'])
      .where('alerts.state', '=', 'acknowledged')
      .orderBy('alerts.acknowledgedAt')
      .limit(20)
      .execute()
  }

  async lotsEnding(db: Executor, days: number) {
    return db
      .selectFrom('materialLots')
      .select((eb) => [
        'materialLots.id',
        'materialLots.number',
        'materialLots.name',
        'materialLots.expiresOn',
        eb
          .selectFrom('calibrationStandards')
          .innerJoin('calibrations', 'calibrations.id', 'calibrationStandards.calibrationId')
          .whereRef('calibrationStandards.lotId', '=', 'materialLots.id')
          .where('calibrations.state', '=', 'in-force')
          .select((count) => count.fn.count<string>('calibrations.id').distinct().as('n'))
          .as('inForce'),
      ])
      .where('materialLots.state', '=', 'in-use')
      .where(sql<boolean>`expires_on < current_date + ${days}::int and expires_on > current_date - 30`)
      .orderBy('materialLots.expiresOn')
      .limit(20)
      .execute()
  }

  async checksDue(db: Executor, days: number) {
    return db
      .selectFrom('instruments')
      .innerJoin(
        (eb) =>
          eb
            .selectFrom('instrumentChecks')
            .select(['instrumentId', 'kind'])
            .select((inner) => inner.fn.max('nextDueOn').as('dueOn'))
            .groupBy(['instrumentId', 'kind'])
            .as('checks'),
        (join) => join.onRef('checks.instrumentId', '=', 'instruments.id'),
      )
      .select(['instruments.id', 'instruments.name', 'checks.kind', 'checks.dueOn'])
      .where('instruments.state', '=', 'in-use')
      .where(sql<boolean>`checks.due_on < current_date + ${days}::int`)
      .orderBy('checks.dueOn')
      .limit(20)
      .execute()
  }

  async failedMail(db: Executor) {
    return db
      .selectFrom('mailMessages')
      .select(['id', 'recipient', 'subject', 'failedAt', 'lastError'])
      .where('state', '=', 'failed')
      .orderBy('id', 'desc')
      .limit(10)
      .execute()
  }

  /** Certificates whose document should exist by now and does not. */
  async unrendered(db: Executor, minutes: number) {
    return db
      .selectFrom('certificates')
      .leftJoin('certificateDocuments', 'certificateDocuments.certificateId', 'certificates.id')
      .select(['certificates.id', 'certificates.number', 'certificates.issuedAt'])
      .where('certificateDocuments.certificateId', 'is', null)
      .where(
        'certificates.issuedAt',
        '<',
        sql<Date>`weirlight_now() - make_interval(mins => ${minutes}::int)`,
      )
      .orderBy('certificates.id')
      .limit(10)
      .execute()
  }

  async invited(db: Executor) {
    return db
      .selectFrom('users')
      .select(['id', 'name', 'createdAt'])
      .where('status', '=', 'invited')
      .orderBy('createdAt')
      .limit(20)
      .execute()
  }

  /** What a new laboratory does not have yet, and cannot work without. */
  async missing(db: Executor) {
    const row = await sql<
      Record<
        'technician' | 'manager' | 'client' | 'authorisation' | 'instrument' | 'lot' | 'calibration',
        boolean
      >
    >`select
      not exists (select from users where role = 'technician' and status <> 'disabled') as technician,
      not exists (select from users where role = 'qa-manager' and status <> 'disabled') as manager,
      not exists (select from clients) as client,
      not exists (select from authorisations) as authorisation,
      not exists (select from instruments) as instrument,
      not exists (select from material_lots) as lot,
      not exists (select from calibrations) as calibration`.execute(db)
    return row.rows[0]
  }

  async newCertificates(db: Executor, given: { clientId: string; userId: string }) {
    return db
      .selectFrom('certificates')
      .innerJoin('samples', 'samples.id', 'certificates.sampleId')
      .select([
        'certificates.id',
        'certificates.number',
        'certificates.issuedAt',
        'samples.number as sampleNumber',
      ])
      .where('certificates.clientId', '=', given.clientId)
      .where('certificates.state', '=', 'issued')
      .where((eb) =>
        eb.not(
          eb.exists(
            eb
              .selectFrom('certificateOpenings')
              .whereRef('certificateOpenings.certificateId', '=', 'certificates.id')
              .where('certificateOpenings.userId', '=', given.userId)
              .select('certificateOpenings.id'),
          ),
        ),
      )
      .orderBy('certificates.id', 'desc')
      .limit(10)
      .execute()
  }

  async counts(db: Executor, clientId: string | null) {
    const scope = clientId === null ? sql`true` : sql`client_id = ${clientId}`
    const row = await sql<
      Record<'receiving' | 'review' | 'alerts' | 'calibrations' | 'batches' | 'waiting', number>
    >`select
      (select count(*)::int from samples where state in ('expected', 'received')) as receiving,
      (select count(*)::int from batches where state = 'submitted') as review,
      (select count(*)::int from alerts where state in ('raised', 'notified') and ${scope}) as alerts,
      (select count(*)::int from calibrations where state = 'submitted') as calibrations,
      (select count(*)::int from batches where state in ('open', 'returned')) as batches,
      (select count(*)::int from determinations where state = 'requested') as waiting`.execute(db)
    return row.rows[0] ?? { receiving: 0, review: 0, alerts: 0, calibrations: 0, batches: 0, waiting: 0 }
  }

  /** the laboratory's own clock for reviewing, kept as data */
  async reviewHours(db: Executor): Promise<number | null> {
    const row = await db
      .selectFrom('clocks')
      .select('hours')
      .where('code', '=', 'house-review')
      .executeTakeFirst()
    return row ? Number(row.hours) : null
  }

  async mailToday(db: Executor) {
    const row = await sql<{ sent: number; waiting: number; failed: number }>`select
      count(*) filter (where state = 'sent')::int as sent,
      count(*) filter (where state in ('waiting', 'sending'))::int as waiting,
      count(*) filter (where state = 'failed')::int as failed
      from mail_messages where created_at > weirlight_now() - interval '24 hours'`.execute(db)
    return row.rows[0] ?? { sent: 0, waiting: 0, failed: 0 }
  }

  async lastSeal(db: Executor) {
    return db
      .selectFrom('historySeals')
      .select(['sealedAt', sql<string>`encode(head, 'hex')`.as('head')])
      .orderBy('number', 'desc')
      .limit(1)
      .executeTakeFirst()
  }

  /** A number typed anywhere: by its beginning, newest first. */
  async byNumber(db: Executor, number: string) {
    const found = await sql<{ kind: string; id: string; number: string; detail: string }>`
      select 'sample' as kind, s.id, s.number, c.name as detail from samples s join clients c on c.id = s.client_id where s.number like ${number}
      union all select 'calibration', k.id, k.number, m.title from calibrations k join methods m on m.id = k.method_id where k.number like ${number}
      union all select 'batch', b.id, b.number, m.title from batches b join methods m on m.id = b.method_id where b.number like ${number}
      union all select 'certificate', f.id, f.number, c.name from certificates f join clients c on c.id = f.client_id where f.number like ${number}
      union all select 'alert', a.id, a.number, c.name from alerts a join clients c on c.id = a.client_id where a.number like ${number}
      union all select 'lot', l.id, l.number, l.name from material_lots l where l.number like ${number}
      union all select 'instrument', i.id, i.number, i.name from instruments i where i.number like ${number}
      order by 3 desc limit 12`.execute(db)
    return found.rows
  }
}
