import { Controller } from '@nestjs/common'
import {
  getControlChart,
  listValidationRuns,
  runValidation,
  validationJson,
  validationPdf,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { CurrentActor, Endpoint, Input, type InputOf } from '../../platform/index.js'
import { ControlChartsService } from './control-charts.service.js'
import { ValidationService } from './validation.service.js'

@Controller()
export class QualityController {
  constructor(
    private readonly charts: ControlChartsService,
    private readonly validation: ValidationService,
  ) {}

  @Endpoint(getControlChart)
  chart(@Input() { query }: InputOf<typeof getControlChart>) {
    return this.charts.chart(query)
  }

  @Endpoint(listValidationRuns)
  list() {
    return this.validation.list()
  }

  @Endpoint(runValidation)
  run(@CurrentActor() actor: Actor) {
    return this.validation.run(actor)
  }

  @Endpoint(validationPdf)
  pdf(@Input() { params }: InputOf<typeof validationPdf>) {
    return this.validation.pdf(params.id)
  }

  @Endpoint(validationJson)
  json(@Input() { params }: InputOf<typeof validationJson>) {
    return this.validation.json(params.id)
  }
}
