import { Injectable } from '@nestjs/common'
import type { ValidationReport } from '@weirlight/shared/assay'
import { sql } from 'kysely'
import type { Executor, Trx } from '../../platform/index.js'

@Injectable()
export class ValidationRepository {
  private rows(db: Executor) {
    return db
      .selectFrom('validationRuns')
      .innerJoin('users', 'users.id', 'validationRuns.byId')
      .select([
        'validationRuns.id',
        'validationRuns.at',
        'validationRuns.byId',
        'users.name as byName',
        'validationRuns.engineVersion',
        'validationRuns.cases',
        'validationRuns.passed',
        'validationRuns.failed',
        'validationRuns.sha256',
        sql<boolean>`validation_runs.pdf is not null`.as('isRendered'),
      ])
  }

  async list(db: Executor) {
    return this.rows(db).orderBy('validationRuns.id', 'desc').limit(100).execute()
  }

  async find(db: Executor, id: string) {
    return this.rows(db).where('validationRuns.id', '=', id).executeTakeFirst()
  }

  async report(db: Executor, id: string) {
    return db.selectFrom('validationRuns').select(['report', 'pdf']).where('id', '=', id).executeTakeFirst()
  }

  async insert(trx: Trx, row: { byId: string; report: ValidationReport; sha256: string }): Promise<string> {
    const { report } = row
    const { id } = await trx
      .insertInto('validationRuns')
      .values({
        byId: row.byId,
        engineVersion: report.engineVersion,
        cases: report.cases,
        passed: report.passed,
        failed: report.failed,
        report: JSON.stringify(report),
        sha256: row.sha256,
      })
      .returning('id')
      .executeTakeFirstOrThrow()
    return id
  }

  /** Once; a kept report is never made again. */
  async keepPdf(trx: Trx, { id, pdf }: { id: string; pdf: Buffer }): Promise<void> {
    await trx
      .updateTable('validationRuns')
      .set({ pdf })
      .where('id', '=', id)
      .where('pdf', 'is', null)
      .execute()
  }
}
