import { Module } from '@nestjs/common'
import { MethodsController } from './methods.controller.js'
import { MethodsRepository } from './methods.repository.js'
import { MethodsService } from './methods.service.js'

@Module({
  controllers: [MethodsController],
  providers: [MethodsService, MethodsRepository],
  exports: [MethodsService],
})
export class MethodsModule {}
