import { Injectable } from '@nestjs/common'
import type { QueryOf, ResponseOf, listSeals, sealView, verifySeals } from '@weirlight/shared/contracts'
import type { z } from 'zod'
import { idFromCursor, SealsService, toPage, type SealRow } from '../../platform/index.js'

/** about a day of hourly seals, so that the check answers while the person waits */
const CHECKED_AT_ONCE = 24

@Injectable()
export class SealsPageService {
  constructor(private readonly seals: SealsService) {}

  async list({ after, limit }: QueryOf<typeof listSeals>): Promise<ResponseOf<typeof listSeals>> {
    const before = idFromCursor(after)
    const rows = await this.seals.list({ before, limit: limit + 1 })
    return toPage(rows, { limit, key: ({ number }) => [number], item: toView })
  }

  async check(): Promise<ResponseOf<typeof verifySeals>> {
    return this.seals.check(CHECKED_AT_ONCE)
  }
}

function toView(row: SealRow): z.input<typeof sealView> {
  return {
    id: row.number,
    firstEntry: row.firstId,
    lastEntry: row.lastId,
    entries: Number(row.entries),
    root: row.root.toString('hex'),
    previousHead: row.number === '1' ? null : row.previousHead.toString('hex'),
    head: row.head.toString('hex'),
    sealedAt: row.sealedAt.toISOString(),
  }
}
