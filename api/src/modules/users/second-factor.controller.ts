import { Controller } from '@nestjs/common'
import {
  confirmSecondFactor,
  getSecondFactor,
  removeSecondFactor,
  startSecondFactor,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { CurrentActor, Endpoint, Input, type InputOf } from '../../platform/index.js'
import { OwnSecondFactorService } from './own-second-factor.service.js'

@Controller()
export class SecondFactorController {
  constructor(private readonly own: OwnSecondFactorService) {}

  @Endpoint(getSecondFactor)
  view(@CurrentActor() actor: Actor) {
    return this.own.view(actor)
  }

  @Endpoint(startSecondFactor)
  start(@CurrentActor() actor: Actor, @Input() { body }: InputOf<typeof startSecondFactor>) {
    return this.own.start(actor, body)
  }

  @Endpoint(confirmSecondFactor)
  confirm(@CurrentActor() actor: Actor, @Input() { body }: InputOf<typeof confirmSecondFactor>) {
    return this.own.confirm(actor, body)
  }

  @Endpoint(removeSecondFactor)
  remove(@CurrentActor() actor: Actor, @Input() { body }: InputOf<typeof removeSecondFactor>) {
    return this.own.remove(actor, body)
  }
}
