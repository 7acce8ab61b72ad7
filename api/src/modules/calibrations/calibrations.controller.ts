import { Controller } from '@nestjs/common'
import {
  copyCalibration,
  getCalibration,
  invalidateCalibration,
  listCalibrations,
  saveCalibration,
  sendBackCalibration,
  signCalibration,
  startCalibration,
  submitCalibration,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { CurrentActor, Endpoint, Input, type InputOf } from '../../platform/index.js'
import { CalibrationsService } from './calibrations.service.js'
import { DecisionsService } from './decisions.service.js'
import { DraftsService } from './drafts.service.js'

@Controller()
export class CalibrationsController {
  constructor(
    private readonly calibrations: CalibrationsService,
    private readonly drafts: DraftsService,
    private readonly decisions: DecisionsService,
  ) {}

  @Endpoint(listCalibrations)
  list(@Input() { query }: InputOf<typeof listCalibrations>) {
    return this.calibrations.list(query)
  }

  @Endpoint(getCalibration)
  get(@Input() { params }: InputOf<typeof getCalibration>) {
    return this.calibrations.get(params.id)
  }

  @Endpoint(startCalibration)
  start(@CurrentActor() actor: Actor, @Input() { body }: InputOf<typeof startCalibration>) {
    return this.drafts.start(actor, body)
  }

  @Endpoint(saveCalibration)
  save(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof saveCalibration>) {
    return this.drafts.save(actor, params.id, body)
  }

  @Endpoint(submitCalibration)
  submit(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof submitCalibration>) {
    return this.decisions.submit(actor, params.id, body)
  }

  @Endpoint(signCalibration)
  sign(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof signCalibration>) {
    return this.decisions.sign(actor, params.id, body)
  }

  @Endpoint(sendBackCalibration)
  sendBack(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof sendBackCalibration>) {
    return this.decisions.sendBack(actor, params.id, body)
  }

  @Endpoint(invalidateCalibration)
  invalidate(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof invalidateCalibration>) {
    return this.decisions.invalidate(actor, params.id, body)
  }

  @Endpoint(copyCalibration)
  copy(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof copyCalibration>) {
    return this.drafts.copy(actor, params.id, body)
  }
}
