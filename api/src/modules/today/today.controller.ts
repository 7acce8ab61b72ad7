import { Controller } from '@nestjs/common'
import { getToday, goTo } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { CurrentActor, Endpoint, Input, type InputOf } from '../../platform/index.js'
import { TodayService } from './today.service.js'

@Controller()
export class TodayController {
  constructor(private readonly today: TodayService) {}

  @Endpoint(getToday)
  get(@CurrentActor() actor: Actor) {
    return this.today.today(actor)
  }

  @Endpoint(goTo)
  go(@Input() { query }: InputOf<typeof goTo>) {
    return this.today.goTo(query)
  }
}
