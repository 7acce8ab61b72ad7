import { Controller } from '@nestjs/common'
import { getMethod, listMethods } from '@weirlight/shared/contracts'
import { Endpoint, Input, type InputOf } from '../../platform/index.js'
import { MethodsService } from './methods.service.js'

@Controller()
export class MethodsController {
  constructor(private readonly methods: MethodsService) {}

  @Endpoint(listMethods)
  list() {
    return this.methods.list()
  }

  @Endpoint(getMethod)
  get(@Input() { params }: InputOf<typeof getMethod>) {
    return this.methods.view(params.id)
  }
}
