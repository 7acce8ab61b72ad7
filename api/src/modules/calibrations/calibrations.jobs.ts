import { Injectable } from '@nestjs/common'
import { defineJob, JobHandler, noData } from '../../platform/index.js'
import { DecisionsService } from './decisions.service.js'

/** Every hour, beside the check at each use: what is over is written down as over. */
export const expireCalibrations = defineJob({
  name: 'calibration.expire',
  data: noData,
  retryLimit: 2,
  schedule: '4 * * * *',
})

@Injectable()
export class CalibrationsWorker {
  constructor(private readonly decisions: DecisionsService) {}

  @JobHandler(expireCalibrations)
  async expire(): Promise<void> {
    await this.decisions.expireOver()
  }
}
