import { Injectable } from '@nestjs/common'
import type { CertificateSnapshot, listCertificates, QueryOf } from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import { idFromCursor, notFound, type Executor, type Trx } from '../../platform/index.js'

export type CertificateRecord = Awaited<ReturnType<CertificatesRepository['list']>>[number]

/** A client reaches its own rows; for everyone else `clientId` is null. */
@Injectable()
export class CertificatesRepository {
  private rows(db: Executor) {
    return db
      .selectFrom('certificates')
      .innerJoin('samples', 'samples.id', 'certificates.sampleId')
      .innerJoin('samplingPoints', 'samplingPoints.id', 'samples.samplingPointId')
      .innerJoin('clients', 'clients.id', 'certificates.clientId')
      .innerJoin('users as issuer', 'issuer.id', 'certificates.issuedBy')
      .leftJoin('certificateDocuments as document', 'document.certificateId', 'certificates.id')
      .select((eb) => [
        'certificates.id',
        'certificates.number',
        'certificates.state',
        'certificates.clientId',
        'certificates.sampleId',
        'certificates.snapshot',
        'certificates.issuedAt',
        'certificates.issuedBy',
        'certificates.amendsId',
        'certificates.amendment',
        'certificates.verificationCode',
        'certificates.withdrawnReason',
        'certificates.version',
        'clients.name as clientName',
        'samples.number as sampleNumber',
        'samplingPoints.name as pointName',
        'issuer.name as issuerName',
        'document.sha256',
        sql<number | null>`octet_length(document.pdf)`.as('bytes'),
        eb
          .exists(
            eb
              .selectFrom('mailMessages')
              .where('mailMessages.aboutKind', '=', 'certificate')
              .whereRef('mailMessages.aboutId', '=', 'certificates.id')
              .where('mailMessages.state', '=', 'sent')
              .select('mailMessages.id'),
          )
          .as('isMailed'),
        eb
          .exists(
            eb
              .selectFrom('certificateOpenings')
              .whereRef('certificateOpenings.certificateId', '=', 'certificates.id')
              .select('certificateOpenings.id'),
          )
          .as('isOpened'),
      ])
  }

  async list(db: Executor, { after, limit, clientId, state, number }: QueryOf<typeof listCertificates>) {
    const before = idFromCursor(after)
    const like = `${(number ?? '').toUpperCase().replace(/[%_\\]/g, '')}%`
    return this.rows(db)
      .$if(before !== undefined, (query) => query.where('certificates.id', '<', before ?? ''))
      .$if(clientId !== undefined, (query) => query.where('certificates.clientId', '=', clientId ?? ''))
      .$if(state !== undefined, (query) => query.where('certificates.state', '=', state ?? ''))
      .$if(number !== undefined, (query) =>
        // each side by its own index; an "or" over two tables would read every certificate
        query.where('certificates.id', 'in', (eb) =>
          eb
            .selectFrom('certificates as own')
            .select('own.id')
            .where('own.number', 'like', like)
            .union(
              eb
                .selectFrom('certificates as ofSample')
                .innerJoin('samples as sample', 'sample.id', 'ofSample.sampleId')
                .select('ofSample.id')
                .where('sample.number', 'like', like),
            ),
        ),
      )
      .orderBy('certificates.id', 'desc')
      .limit(limit + 1)
      .execute()
  }

  async find(db: Executor, { id, clientId }: { id: string; clientId: string | null }) {
    return this.rows(db)
      .where('certificates.id', '=', id)
      .$if(clientId !== null, (query) => query.where('certificates.clientId', '=', clientId ?? ''))
      .executeTakeFirst()
  }

  async lock(trx: Trx, id: string) {
    const row = await trx
      .selectFrom('certificates')
      .selectAll()
      .where('id', '=', id)
      .forUpdate()
      .executeTakeFirst()
    if (!row) throw notFound('certificate')
    return row
  }

  /** The sample's current certificate, locked; one sample has one. */
  async lockCurrent(trx: Trx, sampleId: string) {
    return trx
      .selectFrom('certificates')
      .selectAll()
      .where('sampleId', '=', sampleId)
      .where('state', '=', 'issued')
      .forUpdate()
      .executeTakeFirst()
  }

  async lockSample(trx: Trx, id: string) {
    const row = await trx
      .selectFrom('samples')
      .select(['id', 'state', 'version', 'number'])
      .where('id', '=', id)
      .forUpdate()
      .executeTakeFirst()
    if (!row) throw notFound('sample')
    return row
  }

  async nextNumber(trx: Trx): Promise<string> {
    const found = await sql<{
      number: string
    }>`select next_number('C', 'certificate_numbers', 4) as number`.execute(trx)
    return found.rows[0]?.number ?? ''
  }

  async insert(
    trx: Trx,
    row: {
      number: string
      clientId: string
      sampleId: string
      snapshot: CertificateSnapshot
      verificationCode: string
      amendsId: string | null
      amendment: number
      reason: string
      issuedBy: string
      resultIds: readonly string[]
    },
  ): Promise<string> {
    const { snapshot, resultIds, ...columns } = row
    const { id } = await trx
      .insertInto('certificates')
      .values({ ...columns, snapshot: JSON.stringify(snapshot) })
      .returning('id')
      .executeTakeFirstOrThrow()
    await trx
      .insertInto('certificateResults')
      .values(resultIds.map((resultId) => ({ certificateId: id, resultId })))
      .execute()
    return id
  }

  async move(
    trx: Trx,
    { id, state, reason }: { id: string; state: 'superseded' | 'withdrawn'; reason: string },
  ): Promise<void> {
    await trx
      .updateTable('certificates')
      .set((eb) => ({
        state,
        version: eb('version', '+', 1),
        ...(state === 'withdrawn' ? { withdrawnReason: reason } : {}),
      }))
      .where('id', '=', id)
      .execute()
  }

  async document(db: Executor, certificateId: string) {
    return db
      .selectFrom('certificateDocuments')
      .innerJoin('certificates', 'certificates.id', 'certificateDocuments.certificateId')
      .select(['certificateDocuments.pdf', 'certificateDocuments.sha256', 'certificates.number'])
      .where('certificateDocuments.certificateId', '=', certificateId)
      .executeTakeFirst()
  }

  /** Once: a second worker's document is the same and is left aside. */
  async keepDocument(trx: Trx, row: { certificateId: string; pdf: Buffer; sha256: string }): Promise<void> {
    await trx
      .insertInto('certificateDocuments')
      .values(row)
      .onConflict((conflict) => conflict.column('certificateId').doNothing())
      .execute()
  }

  async unrendered(db: Executor): Promise<string[]> {
    const rows = await db
      .selectFrom('certificates')
      .leftJoin('certificateDocuments', 'certificateDocuments.certificateId', 'certificates.id')
      .select('certificates.id')
      .where('certificateDocuments.certificateId', 'is', null)
      .orderBy('certificates.id')
      .limit(200)
      .execute()
    return rows.map((row) => row.id)
  }

  async recordOpening(trx: Trx, row: { certificateId: string; userId: string }): Promise<void> {
    await trx.insertInto('certificateOpenings').values(row).execute()
  }

  async openings(db: Executor, certificateId: string) {
    return db
      .selectFrom('certificateOpenings')
      .innerJoin('users', 'users.id', 'certificateOpenings.userId')
      .select(['users.name as by', 'certificateOpenings.at'])
      .where('certificateOpenings.certificateId', '=', certificateId)
      .orderBy('certificateOpenings.id', 'desc')
      .limit(50)
      .execute()
  }

  async deliveries(db: Executor, certificateId: string) {
    return db
      .selectFrom('mailMessages')
      .select(['id', 'recipient', 'state', 'attempts', 'sentAt', 'lastError'])
      .where('aboutKind', '=', 'certificate')
      .where('aboutId', '=', certificateId)
      .orderBy('id')
      .execute()
  }

  async neighbours(db: Executor, { id, amendsId }: { id: string; amendsId: string | null }) {
    return db
      .selectFrom('certificates')
      .select(['id', 'number', 'amendsId'])
      .where((eb) =>
        eb.or([eb('amendsId', '=', id), ...(amendsId === null ? [] : [eb('id', '=', amendsId)])]),
      )
      .execute()
  }

  /** Contacts of today, and whoever got the certificate that is replaced. */
  async recipients(
    db: Executor,
    { clientId, amendsId }: { clientId: string; amendsId: string | null },
  ): Promise<string[]> {
    const contacts = await db
      .selectFrom('contacts')
      .select('email')
      .where('clientId', '=', clientId)
      .where('active', '=', true)
      .where('getsCertificates', '=', true)
      .execute()
    const earlier =
      amendsId === null
        ? []
        : await db
            .selectFrom('mailMessages')
            .select('recipient as email')
            .where('aboutKind', '=', 'certificate')
            .where('aboutId', '=', amendsId)
            .execute()
    return [...new Set([...contacts, ...earlier].map((row) => row.email))]
  }

  async byCode(db: Executor, code: string) {
    return db
      .selectFrom('certificates')
      .leftJoin('certificateDocuments', 'certificateDocuments.certificateId', 'certificates.id')
      .leftJoin('certificates as later', 'later.amendsId', 'certificates.id')
      .select([
        'certificates.number',
        'certificates.state',
        'certificates.issuedAt',
        'certificateDocuments.sha256',
        'later.number as replacedBy',
      ])
      .where('certificates.verificationCode', '=', code)
      .executeTakeFirst()
  }

  /** What a snapshot is made of beside the results. */
  async facts(db: Executor, sampleId: string) {
    return db
      .selectFrom('samples')
      .innerJoin('clients', 'clients.id', 'samples.clientId')
      .innerJoin('programmes', 'programmes.id', 'clients.programmeId')
      .innerJoin('samplingPoints', 'samplingPoints.id', 'samples.samplingPointId')
      .selectAll('samples')
      .select((eb) => [
        'clients.name as clientName',
        'clients.address as clientAddress',
        'clients.systemId',
        'clients.agencyName',
        'programmes.code as programmeCode',
        'samplingPoints.code as pointCode',
        'samplingPoints.name as pointName',
        eb
          .selectFrom('contacts')
          .whereRef('contacts.clientId', '=', 'clients.id')
          .where('contacts.active', '=', true)
          .where('contacts.getsCertificates', '=', true)
          .orderBy('contacts.id')
          .select('contacts.email')
          .limit(1)
          .as('contact'),
      ])
      .where('samples.id', '=', sampleId)
      .executeTakeFirstOrThrow()
  }

  async resultFacts(db: Executor, resultIds: readonly string[]) {
    return db
      .selectFrom('results')
      .innerJoin('methods', 'methods.id', 'results.methodId')
      .innerJoin('batches', 'batches.id', 'results.batchId')
      .innerJoin('calibrations', 'calibrations.id', 'results.calibrationId')
      .leftJoin('users as releaser', 'releaser.id', 'results.releasedBy')
      .select([
        'results.id',
        sql<Date | null>`(select max(r.read_at) from position_readings r
          where r.batch_id = results.batch_id and r.position_id = results.position_id)`.as('readAt'),
        'methods.code',
        'methods.edition',
        'methods.definition',
        'batches.number as batchNumber',
        'calibrations.number as calibrationNumber',
        sql<
          string | null
        >`(select string_agg(distinct u.name, ', ') from position_readings r join users u on u.id = r.read_by
          where r.batch_id = results.batch_id and r.position_id = results.position_id)`.as('analystName'),
        'releaser.name as releaserName',
        'releaser.role as releaserRole',
      ])
      .where('results.id', 'in', [...resultIds])
      .execute()
  }
}
