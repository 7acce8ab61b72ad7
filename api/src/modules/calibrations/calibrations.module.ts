import { Module } from '@nestjs/common'
import { InstrumentsModule } from '../instruments/index.js'
import { MaterialsModule } from '../materials/index.js'
import { MethodsModule } from '../methods/index.js'
import { UsersModule } from '../users/index.js'
import { CalibrationsController } from './calibrations.controller.js'
import { CalibrationsWorker } from './calibrations.jobs.js'
import { CalibrationsRepository } from './calibrations.repository.js'
import { CalibrationsService } from './calibrations.service.js'
import { DecisionsService } from './decisions.service.js'
import { DraftsService } from './drafts.service.js'
import { StandardsRepository } from './standards.repository.js'

@Module({
  imports: [InstrumentsModule, MaterialsModule, MethodsModule, UsersModule],
  controllers: [CalibrationsController],
  providers: [
    CalibrationsService,
    DraftsService,
    DecisionsService,
    CalibrationsWorker,
    CalibrationsRepository,
    StandardsRepository,
  ],
  exports: [CalibrationsService, DraftsService, DecisionsService],
})
export class CalibrationsModule {}
