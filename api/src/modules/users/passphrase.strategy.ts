import { Injectable } from '@nestjs/common'
import { PassportStrategy } from '@nestjs/passport'
import type { BodyOf, signIn } from '@weirlight/shared/contracts'
import type { FastifyRequest } from 'fastify'
import { Strategy } from 'passport-local'
import { addressOf } from './address-of.js'
import { SignInService, type Account } from './sign-in.service.js'

/** E-mail and passphrase, by passport's local strategy; a code goes along. */
@Injectable()
export class PassphraseStrategy extends PassportStrategy(Strategy, 'passphrase') {
  constructor(private readonly signIns: SignInService) {
    super({ usernameField: 'email', passwordField: 'password', passReqToCallback: true, session: false })
  }

  validate(request: FastifyRequest): Promise<Account> {
    // the guard has checked it by the contract
    return this.signIns.authenticate(request.body as BodyOf<typeof signIn>, addressOf(request.ip))
  }
}
