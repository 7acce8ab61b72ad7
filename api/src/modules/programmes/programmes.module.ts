import { Module } from '@nestjs/common'
import { ProgrammesController } from './programmes.controller.js'
import { ProgrammesRepository } from './programmes.repository.js'
import { ProgrammesService } from './programmes.service.js'

@Module({ controllers: [ProgrammesController], providers: [ProgrammesService, ProgrammesRepository] })
export class ProgrammesModule {}
