import { Injectable } from '@nestjs/common'
import type { Executor } from '../../platform/index.js'

@Injectable()
export class PortalRepository {
  async unanswered(db: Executor, clientId: string) {
    return db
      .selectFrom('alerts')
      .innerJoin('results', 'results.id', 'alerts.resultId')
      .select((eb) => [
        'alerts.id',
        'results.samplingPointId as pointId',
        'results.analyte',
        'results.form',
        eb
          .selectFrom('certificates')
          .whereRef('certificates.sampleId', '=', 'results.sampleId')
          .where('certificates.state', '=', 'issued')
          .select('certificates.id')
          .limit(1)
          .as('certificateId'),
      ])
      .where('alerts.clientId', '=', clientId)
      .where('alerts.state', 'in', ['raised', 'notified'])
      .orderBy('alerts.id', 'desc')
      .limit(10)
      .execute()
  }
}
