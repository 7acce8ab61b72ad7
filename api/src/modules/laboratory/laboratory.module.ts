import { Module } from '@nestjs/common'
import { LaboratoryController } from './laboratory.controller.js'
import { LaboratoryRepository } from './laboratory.repository.js'
import { LaboratoryService } from './laboratory.service.js'

@Module({
  controllers: [LaboratoryController],
  providers: [LaboratoryRepository, LaboratoryService],
  exports: [LaboratoryService],
})
export class LaboratoryModule {}
