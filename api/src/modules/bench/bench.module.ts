import { Module } from '@nestjs/common'
import { InstrumentsModule } from '../instruments/index.js'
import { LaboratoryModule } from '../laboratory/index.js'
import { MaterialsModule } from '../materials/index.js'
import { MethodsModule } from '../methods/index.js'
import { UsersModule } from '../users/index.js'
import { BenchController } from './bench.controller.js'
import { BenchService } from './bench.service.js'
import { InForceRepository } from './in-force.repository.js'

@Module({
  imports: [UsersModule, LaboratoryModule, MethodsModule, InstrumentsModule, MaterialsModule],
  controllers: [BenchController],
  providers: [BenchService, InForceRepository],
  exports: [BenchService],
})
export class BenchModule {}
