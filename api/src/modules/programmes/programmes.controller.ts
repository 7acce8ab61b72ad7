import { Controller } from '@nestjs/common'
import { listProgrammes } from '@weirlight/shared/contracts'
import { Endpoint } from '../../platform/index.js'
import { ProgrammesService } from './programmes.service.js'

@Controller()
export class ProgrammesController {
  constructor(private readonly programmes: ProgrammesService) {}

  @Endpoint(listProgrammes)
  list() {
    return this.programmes.list()
  }
}
