import { Controller } from '@nestjs/common'
import { getReadiness } from '@weirlight/shared/contracts'
import { Endpoint } from '../../platform/index.js'
import { BenchService } from './bench.service.js'

@Controller()
export class BenchController {
  constructor(private readonly bench: BenchService) {}

  @Endpoint(getReadiness)
  readiness() {
    return this.bench.readiness()
  }
}
