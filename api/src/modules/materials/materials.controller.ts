import { Controller } from '@nestjs/common'
import {
  addMaterial,
  finishMaterial,
  getMaterial,
  listMaterials,
  withdrawMaterial,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { CurrentActor, Endpoint, Input, type InputOf } from '../../platform/index.js'
import { MaterialsService } from './materials.service.js'

@Controller()
export class MaterialsController {
  constructor(private readonly materials: MaterialsService) {}

  @Endpoint(listMaterials)
  list(@Input() { query }: InputOf<typeof listMaterials>) {
    return this.materials.list(query)
  }

  @Endpoint(getMaterial)
  get(@Input() { params }: InputOf<typeof getMaterial>) {
    return this.materials.view(params.id)
  }

  @Endpoint(addMaterial)
  add(@CurrentActor() actor: Actor, @Input() { body }: InputOf<typeof addMaterial>) {
    return this.materials.add(actor, body)
  }

  @Endpoint(finishMaterial)
  finish(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof finishMaterial>) {
    return this.materials.finish(actor, { ...params, ...body })
  }

  @Endpoint(withdrawMaterial)
  withdraw(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof withdrawMaterial>) {
    return this.materials.withdraw(actor, { ...params, ...body })
  }
}
