import { Injectable } from '@nestjs/common'
import type { Assessment, listResults, QueryOf } from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import { idFromCursor, type Executor, type Trx } from '../../platform/index.js'

export type ResultsFilter = Omit<QueryOf<typeof listResults>, 'after' | 'limit'>
export type ResultRecord = Awaited<ReturnType<ResultsRepository['list']>>[number]

/** What is stored of one measured position. */
export interface ResultToStore {
  clientId: string
  sampleId: string
  determinationId: string
  batchId: string
  positionId: string
  calibrationId: string
  methodId: string
  samplingPointId: string
  analyte: string
  form: string
  collectedAt: Date
  assessment: Assessment
  inputs: Record<string, unknown>
  engineVersion: string
}

@Injectable()
export class ResultsRepository {
  private rows(db: Executor) {
    return db
      .selectFrom('results')
      .innerJoin('samples', 'samples.id', 'results.sampleId')
      .innerJoin('clients', 'clients.id', 'results.clientId')
      .innerJoin('samplingPoints', 'samplingPoints.id', 'results.samplingPointId')
      .innerJoin('methods', 'methods.id', 'results.methodId')
      .innerJoin('batches', 'batches.id', 'results.batchId')
      .select([
        'results.id',
        'results.state',
        'results.sampleId',
        'samples.number as sampleNumber',
        'results.clientId',
        'clients.name as clientName',
        'results.samplingPointId as pointId',
        'samplingPoints.code as pointCode',
        'samplingPoints.name as pointName',
        'results.analyte',
        'results.form',
        'results.methodId',
        'methods.title as methodTitle',
        'results.batchId',
        'batches.number as batchNumber',
        'results.positionId',
        'results.calibrationId',
        'results.determinationId',
        'results.collectedAt',
        'results.measuredAt',
        'results.reviewedAt',
        'results.releasedAt',
        'results.reviewedBy',
        'results.releasedBy',
        'results.reportedText',
        'results.unit',
        'results.concentration',
        'results.standardError',
        'results.expandedUncertainty',
        'results.uncertaintyText',
        'results.numericForCompliance',
        'results.verdict',
        'results.explanation',
        'results.limitSnapshot',
        'results.flags',
        'results.inputs',
        'results.engineVersion',
      ])
  }

  async list(
    db: Executor,
    { after, limit, filter }: { after: string | undefined; limit: number; filter: ResultsFilter },
  ) {
    const before = idFromCursor(after)
    const zone = sql`(select time_zone from laboratory)`
    return this.rows(db)
      .$if(before !== undefined, (query) => query.where('results.id', '<', before ?? ''))
      .$if(filter.clientId !== undefined, (query) =>
        query.where('results.clientId', '=', filter.clientId ?? ''),
      )
      .$if(filter.pointId !== undefined, (query) =>
        query.where('results.samplingPointId', '=', filter.pointId ?? ''),
      )
      .$if(filter.methodId !== undefined, (query) =>
        query.where('results.methodId', '=', filter.methodId ?? ''),
      )
      .$if(filter.analyte !== undefined, (query) => query.where('results.analyte', '=', filter.analyte ?? ''))
      .$if(filter.state !== undefined, (query) => query.where('results.state', '=', filter.state ?? ''))
      .$if(filter.verdict !== undefined, (query) =>
        query.where(
          'results.verdict',
          'in',
          filter.verdict === 'above' ? ['above', 'conditional-above'] : ['below', 'conditional-below'],
        ),
      )
      .$if(filter.sample !== undefined, (query) =>
        query.where(
          'samples.number',
          'like',
          `${(filter.sample ?? '').toUpperCase().replace(/[%_\\]/g, '')}%`,
        ),
      )
      .$if(filter.from !== undefined, (query) =>
        query.where(
          sql<boolean>`results.collected_at >= ${filter.from}::date::timestamp at time zone ${zone}`,
        ),
      )
      .$if(filter.to !== undefined, (query) =>
        query.where(
          sql<boolean>`results.collected_at < (${filter.to}::date + 1)::timestamp at time zone ${zone}`,
        ),
      )
      .orderBy('results.id', 'desc')
      .limit(limit + 1)
      .execute()
  }

  async find(db: Executor, id: string) {
    return this.rows(db).where('results.id', '=', id).executeTakeFirst()
  }

  async ofBatch(db: Executor, batchId: string) {
    return this.rows(db).where('results.batchId', '=', batchId).orderBy('results.id').execute()
  }

  async released(db: Executor, given: { sampleId: string }) {
    return this.rows(db)
      .where('results.sampleId', '=', given.sampleId)
      .where('results.state', '=', 'released')
      .orderBy('results.analyte')
      .execute()
  }

  async trend(
    db: Executor,
    given: { pointId: string; analyte: string; form: string | undefined; clientId: string | null },
  ) {
    const newest = await this.rows(db)
      .where('results.samplingPointId', '=', given.pointId)
      .where('results.analyte', '=', given.analyte)
      .where('results.state', '=', 'released')
      .$if(given.form !== undefined, (query) => query.where('results.form', '=', given.form ?? ''))
      .$if(given.clientId !== null, (query) => query.where('results.clientId', '=', given.clientId ?? ''))
      .orderBy('results.collectedAt', 'desc')
      .limit(200)
      .execute()
    return newest.reverse()
  }

  /** One result a position; a batch that was sent back and submitted again stores its new values in their place. */
  async store(trx: Trx, results: readonly ResultToStore[], at: Date): Promise<void> {
    if (results.length === 0) return
    await trx
      .insertInto('results')
      .values(
        results.map(({ assessment, inputs, ...result }) => ({
          ...result,
          concentration: assessment.concentration ?? 0,
          standardError: assessment.standardError ?? 0,
          expandedUncertainty: assessment.expandedUncertainty ?? 0,
          reportedText: assessment.reportedText ?? '',
          uncertaintyText: assessment.uncertaintyText ?? '',
          numericForCompliance: assessment.numericForCompliance,
          unit: assessment.unit ?? 'mg/L',
          limitId: assessment.limit?.id ?? null,
          limitSnapshot: assessment.limit ? JSON.stringify(assessment.limit) : null,
          verdict: assessment.verdict,
          explanation: assessment.explanation,
          flags: assessment.flags,
          inputs: JSON.stringify(inputs),
        })),
      )
      .onConflict((conflict) =>
        conflict.column('positionId').doUpdateSet((eb) => ({
          concentration: eb.ref('excluded.concentration'),
          standardError: eb.ref('excluded.standardError'),
          expandedUncertainty: eb.ref('excluded.expandedUncertainty'),
          reportedText: eb.ref('excluded.reportedText'),
          uncertaintyText: eb.ref('excluded.uncertaintyText'),
          numericForCompliance: eb.ref('excluded.numericForCompliance'),
          unit: eb.ref('excluded.unit'),
          limitId: eb.ref('excluded.limitId'),
          limitSnapshot: eb.ref('excluded.limitSnapshot'),
          verdict: eb.ref('excluded.verdict'),
          explanation: eb.ref('excluded.explanation'),
          flags: eb.ref('excluded.flags'),
          inputs: eb.ref('excluded.inputs'),
          engineVersion: eb.ref('excluded.engineVersion'),
          measuredAt: at,
          version: eb('results.version', '+', 1),
        })),
      )
      .execute()
  }

  async lockOfBatch(trx: Trx, batchId: string) {
    return trx
      .selectFrom('results')
      .select(['id', 'state', 'positionId', 'determinationId', 'sampleId'])
      .where('batchId', '=', batchId)
      .orderBy('id')
      .forUpdate()
      .execute()
  }

  async release(
    trx: Trx,
    { ids, userId, at }: { ids: readonly string[]; userId: string; at: Date },
  ): Promise<void> {
    if (ids.length === 0) return
    await trx
      .updateTable('results')
      .set((eb) => ({
        state: 'released',
        reviewedBy: userId,
        reviewedAt: at,
        releasedBy: userId,
        releasedAt: at,
        version: eb('version', '+', 1),
      }))
      .where('id', 'in', [...ids])
      .execute()
  }

  async setAside(
    trx: Trx,
    { ids, userId, at }: { ids: readonly string[]; userId: string; at: Date },
  ): Promise<void> {
    if (ids.length === 0) return
    await trx
      .updateTable('results')
      .set((eb) => ({
        state: 'not-reported',
        reviewedBy: userId,
        reviewedAt: at,
        version: eb('version', '+', 1),
      }))
      .where('id', 'in', [...ids])
      .execute()
  }
}
