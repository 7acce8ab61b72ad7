import { Controller } from '@nestjs/common'
import { portalNow, portalResults, portalTrend, portalUtility } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { CurrentActor, Endpoint, Input, type InputOf } from '../../platform/index.js'
import { PortalService } from './portal.service.js'

@Controller()
export class PortalController {
  constructor(private readonly portal: PortalService) {}

  @Endpoint(portalNow)
  now(@CurrentActor() actor: Actor) {
    return this.portal.now(actor)
  }

  @Endpoint(portalResults)
  results(@CurrentActor() actor: Actor, @Input() { query }: InputOf<typeof portalResults>) {
    return this.portal.listResults(actor, query)
  }

  @Endpoint(portalTrend)
  trend(@CurrentActor() actor: Actor, @Input() { query }: InputOf<typeof portalTrend>) {
    return this.portal.trend(actor, query)
  }

  @Endpoint(portalUtility)
  utility(@CurrentActor() actor: Actor) {
    return this.portal.utility(actor)
  }
}
