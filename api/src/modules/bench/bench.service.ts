import { Injectable } from '@nestjs/common'
import type { ResponseOf, getReadiness } from '@weirlight/shared/contracts'
import { Database } from '../../platform/index.js'
import { InstrumentsService } from '../instruments/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { MaterialsService } from '../materials/index.js'
import { MethodsService } from '../methods/index.js'
import { AuthorisationService } from '../users/index.js'
import { InForceRepository } from './in-force.repository.js'
import { readinessLines } from './readiness-lines.js'

@Injectable()
export class BenchService {
  constructor(
    private readonly db: Database,
    private readonly inForce: InForceRepository,
    private readonly methods: MethodsService,
    private readonly instruments: InstrumentsService,
    private readonly materials: MaterialsService,
    private readonly authorisations: AuthorisationService,
    private readonly laboratory: LaboratoryService,
  ) {}

  /** The same few queries however many methods there are. */
  async readiness(): Promise<ResponseOf<typeof getReadiness>> {
    const db = this.db.read
    const [methods, calibrations, instruments, materials, people, today] = await Promise.all([
      this.methods.list(),
      this.inForce.listCalibrations(db),
      this.instruments.listAll(db),
      this.materials.listAll(db),
      this.authorisations.listInForce(db, 'read'),
      this.laboratory.today(db),
    ])
    return {
      methods: methods.items
        .filter(({ active }) => active)
        .map(({ id, title, analyte }) => {
          const lines = readinessLines({
            analyte,
            today,
            instruments,
            materials,
            calibrations: calibrations.filter(({ methodId }) => methodId === id),
            people: people.filter(({ methodId }) => methodId === id),
          })
          return { methodId: id, title, ready: lines.every(({ ready }) => ready), lines }
        }),
    }
  }
}
