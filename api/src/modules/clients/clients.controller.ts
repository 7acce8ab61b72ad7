import { Controller } from '@nestjs/common'
import {
  addClient,
  addContact,
  addPoint,
  changeClient,
  changeContact,
  changePoint,
  getClient,
  listClients,
  removeContact,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { CurrentActor, Endpoint, Input, type InputOf } from '../../platform/index.js'
import { ClientsService } from './clients.service.js'
import { ContactsService } from './contacts.service.js'

@Controller()
export class ClientsController {
  constructor(
    private readonly clients: ClientsService,
    private readonly contacts: ContactsService,
  ) {}

  @Endpoint(listClients)
  list() {
    return this.clients.list()
  }

  @Endpoint(getClient)
  get(@Input() { params }: InputOf<typeof getClient>) {
    return this.clients.view(params.id)
  }

  @Endpoint(addClient)
  add(@CurrentActor() actor: Actor, @Input() { body }: InputOf<typeof addClient>) {
    return this.clients.add(actor, body)
  }

  @Endpoint(changeClient)
  change(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof changeClient>) {
    return this.clients.change(actor, params.id, body)
  }

  @Endpoint(addContact)
  addContact(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof addContact>) {
    return this.contacts.add(actor, params.id, body)
  }

  @Endpoint(changeContact)
  changeContact(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof changeContact>) {
    return this.contacts.change(actor, params.id, body)
  }

  @Endpoint(removeContact)
  removeContact(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof removeContact>) {
    return this.contacts.remove(actor, params.id, body)
  }

  @Endpoint(addPoint)
  addPoint(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof addPoint>) {
    return this.clients.addPoint(actor, params.id, body)
  }

  @Endpoint(changePoint)
  changePoint(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof changePoint>) {
    return this.clients.changePoint(actor, params.id, body)
  }
}
