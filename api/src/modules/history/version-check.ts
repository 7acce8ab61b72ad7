import { Injectable } from '@nestjs/common'
import type { Executor } from '../../platform/database/executor.js'
import { ProblemError } from '../../platform/http/problem.js'
import { HistoryRepository } from './history.repository.js'

export interface Versioned {
  id: string
  version: number
}

/** A form that was opened before somebody else's change is refused, and told whose change it was. */
@Injectable()
export class VersionCheck {
  constructor(private readonly history: HistoryRepository) {}

  /**
   * After the row is locked. `thing` is the table: `versions.assert(trx, { thing: 'samples', row, version })`.
   * @throws stale
   */
  async assert(
    db: Executor,
    { thing, row, version }: { thing: string; row: Versioned; version: number },
  ): Promise<void> {
    if (row.version === version) return
    const last = await this.history.findLastChange(db, thing, row.id)
    if (!last) {
      throw new ProblemError(
        'stale',
        'This was changed since you opened it. Load it again, then repeat your change.',
      )
    }
    throw new ProblemError(
      'stale',
      `${last.changedBy} changed this since you opened it. Load it again, then repeat your change.`,
      { conflict: { changedBy: last.changedBy, changedAt: last.changedAt.toISOString() } },
    )
  }
}
