import { Controller } from '@nestjs/common'
import {
  authoriseUser,
  changeUser,
  disableUser,
  enableUser,
  inviteUser,
  inviteUserAgain,
  listUsers,
  startPassphraseReset,
  takeOffSecondFactor,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { CurrentActor, Endpoint, Input, type InputOf } from '../../platform/index.js'
import { UsersService } from './users.service.js'

@Controller()
export class UsersController {
  constructor(private readonly users: UsersService) {}

  @Endpoint(listUsers)
  list() {
    return this.users.list()
  }

  @Endpoint(inviteUser)
  invite(@CurrentActor() actor: Actor, @Input() { body }: InputOf<typeof inviteUser>) {
    return this.users.invite(actor, body)
  }

  @Endpoint(inviteUserAgain)
  inviteAgain(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof inviteUserAgain>) {
    return this.users.inviteAgain(actor, { ...params, ...body })
  }

  @Endpoint(changeUser)
  change(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof changeUser>) {
    return this.users.change(actor, params.id, body)
  }

  @Endpoint(startPassphraseReset)
  startReset(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof startPassphraseReset>) {
    return this.users.startReset(actor, { ...params, ...body })
  }

  @Endpoint(takeOffSecondFactor)
  takeOffSecondFactor(
    @CurrentActor() actor: Actor,
    @Input() { params, body }: InputOf<typeof takeOffSecondFactor>,
  ) {
    return this.users.takeOffSecondFactor(actor, { ...params, ...body })
  }

  @Endpoint(disableUser)
  disable(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof disableUser>) {
    return this.users.disable(actor, { ...params, ...body })
  }

  @Endpoint(enableUser)
  enable(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof enableUser>) {
    return this.users.enable(actor, { ...params, ...body })
  }

  @Endpoint(authoriseUser)
  authorise(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof authoriseUser>) {
    return this.users.authorise(actor, params.id, body)
  }
}
