import { Controller } from '@nestjs/common'
import {
  addInstrument,
  getInstrument,
  listInstruments,
  recordCheck,
  returnInstrument,
  takeInstrumentOut,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { CurrentActor, Endpoint, Input, type InputOf } from '../../platform/index.js'
import { InstrumentsService } from './instruments.service.js'

@Controller()
export class InstrumentsController {
  constructor(private readonly instruments: InstrumentsService) {}

  @Endpoint(listInstruments)
  list() {
    return this.instruments.list()
  }

  @Endpoint(getInstrument)
  get(@Input() { params }: InputOf<typeof getInstrument>) {
    return this.instruments.view(params.id)
  }

  @Endpoint(addInstrument)
  add(@CurrentActor() actor: Actor, @Input() { body }: InputOf<typeof addInstrument>) {
    return this.instruments.add(actor, body)
  }

  @Endpoint(recordCheck)
  recordCheck(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof recordCheck>) {
    return this.instruments.recordCheck(actor, params.id, body)
  }

  @Endpoint(takeInstrumentOut)
  takeOut(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof takeInstrumentOut>) {
    return this.instruments.takeOut(actor, { ...params, ...body })
  }

  @Endpoint(returnInstrument)
  putBack(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof returnInstrument>) {
    return this.instruments.putBack(actor, { ...params, ...body })
  }
}
