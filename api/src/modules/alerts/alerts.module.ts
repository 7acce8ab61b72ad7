import { Module } from '@nestjs/common'
import { LaboratoryModule } from '../laboratory/index.js'
import { AlertsController } from './alerts.controller.js'
import { AlertsRepository } from './alerts.repository.js'
import { AlertsService } from './alerts.service.js'

@Module({
  imports: [LaboratoryModule],
  controllers: [AlertsController],
  providers: [AlertsService, AlertsRepository],
  exports: [AlertsService],
})
export class AlertsModule {}
