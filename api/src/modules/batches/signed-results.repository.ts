import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor } from '../../platform/index.js'

/** One number of the batch as it was on the screen when it was released. */
export interface SignedResult {
  result: string
  sample: string
  analyte: string
  form: string
  state: string
  concentration: number
  text: string
  unit: string
  uncertainty: string
  verdict: string | null
  flags: string[]
  engineVersion: string
}

@Injectable()
export class SignedResultsRepository {
  /** What a release signature covers: every number of the batch, in one order. */
  async list(db: Executor, batchId: string): Promise<SignedResult[]> {
    const { rows } = await sql<SignedResult>`
      select r.id as result, s.number as sample, r.analyte, r.form, r.state, r.concentration, r.reported_text as text, r.unit,
        r.uncertainty_text as uncertainty, r.verdict, r.flags, r.engine_version
      from results r join samples s on s.id = r.sample_id where r.batch_id = ${batchId} order by r.id`.execute(
      db,
    )
    return rows
  }
}
