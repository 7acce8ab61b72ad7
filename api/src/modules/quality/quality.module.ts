import { Module } from '@nestjs/common'
import { LaboratoryModule } from '../laboratory/index.js'
import { ControlChartsRepository } from './control-charts.repository.js'
import { ControlChartsService } from './control-charts.service.js'
import { QualityController } from './quality.controller.js'
import { ValidationRepository } from './validation.repository.js'
import { ValidationService } from './validation.service.js'

@Module({
  imports: [LaboratoryModule],
  controllers: [QualityController],
  providers: [ControlChartsService, ControlChartsRepository, ValidationService, ValidationRepository],
})
export class QualityModule {}
