import { Injectable } from '@nestjs/common'
import type { MethodRecord, ResponseOf, getMethod } from '@weirlight/shared/contracts'
import { Database, notFound, type Executor } from '../../platform/index.js'
import { MethodsRepository, type MethodRow } from './methods.repository.js'

@Injectable()
export class MethodsService {
  constructor(
    private readonly db: Database,
    private readonly methods: MethodsRepository,
  ) {}

  async list(): Promise<{ items: MethodRow[] }> {
    return { items: await this.methods.list(this.db.read) }
  }

  async get(db: Executor, id: string): Promise<MethodRow & { definition: MethodRecord }> {
    const row = await this.methods.find(db, id)
    if (!row) throw notFound('method')
    return row
  }

  async view(id: string): Promise<ResponseOf<typeof getMethod>> {
    const row = await this.get(this.db.read, id)
    return { ...row, molarMass: row.definition.molarMass }
  }
}
