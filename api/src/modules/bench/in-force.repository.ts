import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor } from '../../platform/index.js'

export interface CalibrationInForce {
  id: string
  number: string
  methodId: string
  instrumentId: string
  cellPathCm: string
  validUntil: Date | null
}

@Injectable()
export class InForceRepository {
  async listCalibrations(db: Executor): Promise<CalibrationInForce[]> {
    const { rows } = await sql<CalibrationInForce>`
      select id, number, method_id, instrument_id, cell_path_cm, valid_until from calibrations
      where state = 'in-force' and (valid_until is null or valid_until > weirlight_now())
      order by valid_until desc nulls first, id desc`.execute(db)
    return rows
  }
}
