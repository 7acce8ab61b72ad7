import { Injectable } from '@nestjs/common'
import { PassportStrategy } from '@nestjs/passport'
import type { FastifyRequest } from 'fastify'
import { Strategy } from 'passport-local'
import { addressOf } from './address-of.js'
import { SignInService, type Account } from './sign-in.service.js'

/** E-mail and passphrase, by passport's local strategy. */
@Injectable()
export class PassphraseStrategy extends PassportStrategy(Strategy, 'passphrase') {
  constructor(private readonly signIns: SignInService) {
    super({ usernameField: 'email', passwordField: 'password', passReqToCallback: true, session: false })
  }

  validate(request: FastifyRequest, email: string, passphrase: string): Promise<Account> {
    return this.signIns.authenticate(email, passphrase, addressOf(request.ip))
  }
}
