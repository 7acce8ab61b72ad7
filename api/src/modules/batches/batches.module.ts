import { Module } from '@nestjs/common'
import { CalibrationsModule } from '../calibrations/index.js'
import { InstrumentsModule } from '../instruments/index.js'
import { MaterialsModule } from '../materials/index.js'
import { MethodsModule } from '../methods/index.js'
import { SamplesModule } from '../samples/index.js'
import { UsersModule } from '../users/index.js'
import { BatchesController } from './batches.controller.js'
import { BatchesRepository } from './batches.repository.js'
import { BatchesService } from './batches.service.js'
import { OpeningRepository } from './opening.repository.js'
import { OpeningService } from './opening.service.js'
import { PositionsRepository } from './positions.repository.js'
import { ReadingFilesService } from './reading-files.service.js'
import { RunningService } from './running.service.js'
import { SignedResultsRepository } from './signed-results.repository.js'

@Module({
  imports: [
    CalibrationsModule,
    InstrumentsModule,
    MaterialsModule,
    MethodsModule,
    SamplesModule,
    UsersModule,
  ],
  controllers: [BatchesController],
  providers: [
    BatchesService,
    OpeningService,
    RunningService,
    ReadingFilesService,
    BatchesRepository,
    OpeningRepository,
    PositionsRepository,
    SignedResultsRepository,
  ],
  exports: [BatchesService, OpeningService, RunningService, BatchesRepository],
})
export class BatchesModule {}
