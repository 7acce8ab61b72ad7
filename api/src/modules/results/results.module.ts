import { Module } from '@nestjs/common'
import { BatchesModule } from '../batches/index.js'
import { CalibrationsModule } from '../calibrations/index.js'
import { LaboratoryModule } from '../laboratory/index.js'
import { UsersModule } from '../users/index.js'
import { ResultsController } from './results.controller.js'
import { ResultsRepository } from './results.repository.js'
import { ResultsService } from './results.service.js'
import { ReviewRepository } from './review.repository.js'
import { ReviewService } from './review.service.js'
import { StoryRepository } from './story.repository.js'
import { StoryService } from './story.service.js'

@Module({
  imports: [BatchesModule, CalibrationsModule, LaboratoryModule, UsersModule],
  controllers: [ResultsController],
  providers: [
    ResultsService,
    ResultsRepository,
    ReviewService,
    ReviewRepository,
    StoryService,
    StoryRepository,
  ],
  exports: [ResultsService, ReviewService],
})
export class ResultsModule {}
