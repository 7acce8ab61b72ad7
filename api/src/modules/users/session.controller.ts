import { Controller, Req, UseGuards } from '@nestjs/common'
import {
  acceptInvitation,
  forgotPassphrase,
  getInvitation,
  getSession,
  resetPassphrase,
  signIn,
  signOut,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import type { FastifyRequest } from 'fastify'
import { Endpoint, Input, type InputOf, MaybeActor } from '../../platform/index.js'
import { addressOf } from './address-of.js'
import { InvitationsService } from './invitations.service.js'
import { SignInGuard, SigningIn } from './sign-in.guard.js'
import { SignInService, type Account } from './sign-in.service.js'

@Controller()
export class SessionController {
  constructor(
    private readonly signIns: SignInService,
    private readonly invitations: InvitationsService,
  ) {}

  @UseGuards(SignInGuard)
  @Endpoint(signIn)
  signIn(@Req() request: FastifyRequest, @SigningIn() account: Account) {
    return this.signIns.begin(request, account)
  }

  @Endpoint(getSession)
  current(@Req() request: FastifyRequest, @MaybeActor() actor: Actor | undefined) {
    return this.signIns.current(request, actor)
  }

  @Endpoint(signOut)
  signOut(@Req() request: FastifyRequest) {
    return this.signIns.end(request)
  }

  @Endpoint(forgotPassphrase)
  forgot(@Req() request: FastifyRequest, @Input() { body }: InputOf<typeof forgotPassphrase>) {
    return this.invitations.forget(body.email, addressOf(request.ip))
  }

  @Endpoint(resetPassphrase)
  reset(@Input() { body }: InputOf<typeof resetPassphrase>) {
    return this.invitations.reset(body.token, body.passphrase)
  }

  @Endpoint(getInvitation)
  invitation(@Input() { params }: InputOf<typeof getInvitation>) {
    return this.invitations.view(params.token)
  }

  @Endpoint(acceptInvitation)
  accept(@Input() { params, body }: InputOf<typeof acceptInvitation>) {
    return this.invitations.accept(params.token, body)
  }
}
