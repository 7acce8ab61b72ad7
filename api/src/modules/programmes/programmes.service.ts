import { Injectable } from '@nestjs/common'
import type { ResponseOf, listProgrammes } from '@weirlight/shared/contracts'
import { Database } from '../../platform/index.js'
import { ProgrammesRepository } from './programmes.repository.js'

@Injectable()
export class ProgrammesService {
  constructor(
    private readonly db: Database,
    private readonly programmes: ProgrammesRepository,
  ) {}

  async list(): Promise<ResponseOf<typeof listProgrammes>> {
    const [programmes, limits, clients] = await Promise.all([
      this.programmes.list(this.db.read),
      this.programmes.listLimits(this.db.read),
      this.programmes.listClients(this.db.read),
    ])
    const items = programmes.map((programme) => ({
      ...programme,
      limits: limits.filter(({ programmeId }) => programmeId === programme.id),
      clients: clients.filter(({ programmeId }) => programmeId === programme.id),
    }))
    return { items }
  }
}
