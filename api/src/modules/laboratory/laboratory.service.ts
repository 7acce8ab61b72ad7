import { Injectable } from '@nestjs/common'
import type { BodyOf, changeLaboratory, laboratoryView } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import type { z } from 'zod'
import { Database, type Executor, notFound, type Trx, assertVersion } from '../../platform/index.js'
import { LaboratoryRepository, type LaboratoryRow } from './laboratory.repository.js'

type LaboratoryView = z.infer<typeof laboratoryView>

@Injectable()
export class LaboratoryService {
  constructor(
    private readonly db: Database,
    private readonly laboratory: LaboratoryRepository,
  ) {}

  async view(): Promise<LaboratoryView> {
    return toView(await this.get(this.db.read))
  }

  async get(db: Executor): Promise<LaboratoryRow> {
    const row = await this.laboratory.find(db)
    if (!row) throw notFound('laboratory')
    return row
  }

  async find(db: Executor): Promise<LaboratoryRow | undefined> {
    return this.laboratory.find(db)
  }

  /** Today in the laboratory's zone, `2026-12-01`. */
  async today(db: Executor): Promise<string> {
    return this.laboratory.today(db)
  }

  /** The first time only: the time zone stays what it is set to. */
  async setUp(trx: Trx, row: Omit<LaboratoryRow, 'id' | 'version'>): Promise<void> {
    await this.laboratory.insert(trx, row)
  }

  async change(actor: Actor, body: BodyOf<typeof changeLaboratory>): Promise<LaboratoryView> {
    return this.db.transaction(actor, 'laboratory.change', null, async (trx) => {
      const row = await this.laboratory.lock(trx)
      if (!row) throw notFound('laboratory')
      await assertVersion(trx, { thing: 'laboratory', id: row.id, has: row.version, sent: body.version })
      await this.laboratory.update(trx, body)
      return toView(await this.get(trx))
    })
  }
}

function toView({ id: _, ...view }: LaboratoryRow): LaboratoryView {
  return view
}
