import { Module } from '@nestjs/common'
import { FamilyRepository } from './family.repository.js'
import { HistoryController } from './history.controller.js'
import { HistoryRepository } from './history.repository.js'
import { HistoryService } from './history.service.js'
import { SealsPageService } from './seals-page.service.js'

@Module({
  controllers: [HistoryController],
  providers: [HistoryRepository, FamilyRepository, HistoryService, SealsPageService],
})
export class HistoryModule {}
