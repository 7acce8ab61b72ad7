import { Module } from '@nestjs/common'
import { InstrumentsController } from './instruments.controller.js'
import { InstrumentsRepository } from './instruments.repository.js'
import { InstrumentsService } from './instruments.service.js'

@Module({
  controllers: [InstrumentsController],
  providers: [InstrumentsRepository, InstrumentsService],
  exports: [InstrumentsService],
})
export class InstrumentsModule {}
