import { Injectable } from '@nestjs/common'
import type { samplingPointView } from '@weirlight/shared/contracts'
import { sql } from 'kysely'
import type { z } from 'zod'
import type { Executor, Trx } from '../../platform/index.js'

export type SamplingPointView = z.infer<typeof samplingPointView>
export type PointRow = SamplingPointView & { clientId: string }

@Injectable()
export class PointsRepository {
  async list(db: Executor, clientId: string): Promise<SamplingPointView[]> {
    const { rows } = await sql<SamplingPointView>`
      select id, code, name, kind, active, version from sampling_points
      where client_id = ${clientId} order by not active, code, id`.execute(db)
    return rows
  }

  async lock(trx: Trx, id: string): Promise<PointRow | undefined> {
    const { rows } = await sql<PointRow>`
      select id, client_id, code, name, kind, active, version from sampling_points
      where id = ${id} for no key update`.execute(trx)
    return rows[0]
  }

  async insert(
    trx: Trx,
    clientId: string,
    row: Pick<SamplingPointView, 'code' | 'name' | 'kind'>,
  ): Promise<void> {
    await sql`insert into sampling_points (client_id, code, name, kind)
      values (${clientId}, ${row.code}, ${row.name}, ${row.kind})`.execute(trx)
  }

  async update(
    trx: Trx,
    id: string,
    row: Pick<SamplingPointView, 'name' | 'kind' | 'active'>,
  ): Promise<void> {
    await sql`update sampling_points set name = ${row.name}, kind = ${row.kind}, active = ${row.active},
      version = version + 1 where id = ${id}`.execute(trx)
  }
}
