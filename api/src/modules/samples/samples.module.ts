import { Module } from '@nestjs/common'
import { ManifestsService } from './manifests.service.js'
import { ReceivingRepository } from './receiving.repository.js'
import { ReceivingService } from './receiving.service.js'
import { SamplesController } from './samples.controller.js'
import { SamplesRepository } from './samples.repository.js'
import { SamplesService } from './samples.service.js'
import { UploadsRepository } from './uploads.repository.js'

@Module({
  controllers: [SamplesController],
  providers: [
    SamplesService,
    ReceivingService,
    ManifestsService,
    SamplesRepository,
    ReceivingRepository,
    UploadsRepository,
  ],
  exports: [SamplesService, ReceivingService, UploadsRepository],
})
export class SamplesModule {}
