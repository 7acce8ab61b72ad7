import { Controller } from '@nestjs/common'
import { acknowledgeAlert, cancelAlert, closeAlert, getAlert, listAlerts } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { CurrentActor, Endpoint, Input, type InputOf } from '../../platform/index.js'
import { AlertsService } from './alerts.service.js'

@Controller()
export class AlertsController {
  constructor(private readonly alerts: AlertsService) {}

  @Endpoint(listAlerts)
  list(@CurrentActor() actor: Actor, @Input() { query }: InputOf<typeof listAlerts>) {
    return this.alerts.list(actor, query)
  }

  @Endpoint(getAlert)
  get(@CurrentActor() actor: Actor, @Input() { params }: InputOf<typeof getAlert>) {
    return this.alerts.get(actor, params.id)
  }

  @Endpoint(acknowledgeAlert)
  acknowledge(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof acknowledgeAlert>) {
    return this.alerts.acknowledge(actor, params.id, body)
  }

  @Endpoint(closeAlert)
  close(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof closeAlert>) {
    return this.alerts.close(actor, params.id, body)
  }

  @Endpoint(cancelAlert)
  cancel(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof cancelAlert>) {
    return this.alerts.cancel(actor, params.id, body)
  }
}
