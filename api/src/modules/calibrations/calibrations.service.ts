import { Injectable } from '@nestjs/common'
import type { CalibrationView, QueryOf, listCalibrations } from '@weirlight/shared/contracts'
import { calibrationStates } from '@weirlight/shared/states'
import {
  Database,
  idFromCursor,
  notAllowedNow,
  notFound,
  toPage,
  type AnswerOf,
  type Executor,
} from '../../platform/index.js'
import { SigningService } from '../users/index.js'
import type { CalibrationUse, CalibrationWholeRow, StoredFit } from './calibration-rows.js'
import { signedContent, toListRow, toView, type CalibrationWhole } from './calibration-whole.js'
import { CalibrationsRepository } from './calibrations.repository.js'
import { StandardsRepository } from './standards.repository.js'

export interface CalibrationInForce {
  row: CalibrationWholeRow
  stored: StoredFit
  validUntil: Date
}

/** Calibrations as they are read: lists, one whole, and the one that may carry results. */
@Injectable()
export class CalibrationsService {
  constructor(
    private readonly db: Database,
    private readonly calibrations: CalibrationsRepository,
    private readonly standards: StandardsRepository,
    private readonly signing: SigningService,
  ) {}

  async list(query: QueryOf<typeof listCalibrations>): Promise<AnswerOf<typeof listCalibrations>> {
    const { after, limit, ...filter } = query
    const rows = await this.calibrations.list(this.db.read, { ...filter, before: idFromCursor(after), limit })
    return toPage(rows, { limit, key: (row) => [row.id], item: toListRow })
  }

  async get(id: string): Promise<CalibrationView> {
    return this.view(this.db.read, id)
  }

  async view(db: Executor, id: string): Promise<CalibrationView> {
    const whole = await this.whole(db, id)
    const content = signedContent(whole, whole.row.justification)
    return toView(whole, await this.signing.list(db, 'calibrations', id, content))
  }

  async whole(db: Executor, id: string): Promise<CalibrationWhole> {
    const row = await this.calibrations.find(db, id)
    if (!row) throw notFound('calibration')
    return {
      row,
      standards: await this.standards.list(db, id),
      readings: await this.standards.listReadings(db, id),
    }
  }

  /** The calibration, if it may carry results at this moment. @throws not-allowed-now with what it is instead */
  async getInForce(db: Executor, id: string): Promise<CalibrationInForce> {
    const use = await this.calibrations.findUse(db, id)
    const row = await this.calibrations.find(db, id)
    if (!use || !row) throw notFound('calibration')
    calibrationStates.move(use.state, 'carry')
    refuseOver(use)
    const { stored, validUntil } = row
    if (!stored || !validUntil) {
      throw new Error(`Calibration ${row.number} is in force without a fit or an end.`)
    }
    return { row, stored, validUntil }
  }

  /**
   * A batch that was opened under a calibration is finished under it, also after a newer one has replaced it: its own
   * verification standards vouch for it. Not so once its time is over or it was taken out of force.
   */
  async requireUsable(db: Executor, id: string): Promise<void> {
    const use = await this.calibrations.findUse(db, id)
    if (!use) throw notFound('calibration')
    if (use.state !== 'replaced') calibrationStates.move(use.state, 'carry')
    refuseOver(use)
  }
}

/** The database's clock decides, as it does for the job that writes the end down. */
function refuseOver({ number, validUntil, now }: CalibrationUse): void {
  if (validUntil && validUntil > now) return
  const until = validUntil?.toISOString().slice(0, 16).replace('T', ' ') ?? ''
  throw notAllowedNow(`Calibration ${number} was valid until ${until} UTC. Measure with a newer one.`)
}
