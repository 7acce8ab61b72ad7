import { Injectable } from '@nestjs/common'
import { Database } from '../database/database.js'
import { JobHandler } from '../jobs/job-handler.decorator.js'
import { defineJob, noData } from '../jobs/job.js'
import { SignInAttemptsRepository } from '../sessions/sign-in-attempts.repository.js'
import { SealsRepository } from './seals.repository.js'
import { SealsService } from './seals.service.js'

const MONTHS_AHEAD = 12
const DAYS_OF_ATTEMPTS = 90

export const sealHistory = defineJob({
  name: 'history.seal',
  data: noData,
  expireSeconds: 1800,
  schedule: '7 * * * *',
})
/** every night: next year's months of history, and the end of old sign-in attempts */
export const keepHouse = defineJob({ name: 'platform.keep-house', data: noData, schedule: '20 1 * * *' })

@Injectable()
export class SealsWorker {
  constructor(
    private readonly db: Database,
    private readonly service: SealsService,
    private readonly seals: SealsRepository,
    private readonly attempts: SignInAttemptsRepository,
  ) {}

  @JobHandler(sealHistory)
  async seal(): Promise<void> {
    await this.service.seal()
  }

  @JobHandler(keepHouse)
  async keepHouse(): Promise<void> {
    await this.db.unwatched(async (trx) => {
      await this.seals.makePartitions(trx, { monthsAhead: MONTHS_AHEAD })
      await this.attempts.deleteOlderThan(trx, DAYS_OF_ATTEMPTS)
    })
  }
}
