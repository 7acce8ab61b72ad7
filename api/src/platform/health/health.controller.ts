import { Controller } from '@nestjs/common'
import { getHealth } from '@weirlight/shared/contracts'
import { Endpoint } from '../http/endpoint.decorator.js'
import { HealthService } from './health.service.js'

@Controller()
export class HealthController {
  constructor(private readonly health: HealthService) {}

  @Endpoint(getHealth)
  get() {
    return this.health.check()
  }
}
