import { Controller } from '@nestjs/common'
import { changeLaboratory, getLaboratory } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { CurrentActor, Endpoint, Input, type InputOf } from '../../platform/index.js'
import { LaboratoryService } from './laboratory.service.js'

@Controller()
export class LaboratoryController {
  constructor(private readonly laboratory: LaboratoryService) {}

  @Endpoint(getLaboratory)
  get() {
    return this.laboratory.view()
  }

  @Endpoint(changeLaboratory)
  change(@CurrentActor() actor: Actor, @Input() { body }: InputOf<typeof changeLaboratory>) {
    return this.laboratory.change(actor, body)
  }
}
