import { Injectable, type CanActivate, type ExecutionContext } from '@nestjs/common'
import { Reflector } from '@nestjs/core'
import type { Endpoint as Contract } from '@weirlight/shared/contracts'
import { can } from '@weirlight/shared/permissions'
import type { FastifyRequest } from 'fastify'
import { Settings } from '../config/settings.js'
import { SessionService } from '../sessions/session.service.js'
import { CONTRACT } from './endpoint.decorator.js'
import { assertSameSite } from './same-site.js'
import { ProblemError } from './problem.js'

/** Every route passes here. What declares no permission is refused, not let through. */
@Injectable()
export class AccessGuard implements CanActivate {
  constructor(
    private readonly reflector: Reflector,
    private readonly sessions: SessionService,
    private readonly settings: Settings,
  ) {}

  async canActivate(context: ExecutionContext): Promise<boolean> {
    const request = context.switchToHttp().getRequest<FastifyRequest>()
    assertSameSite(request, this.settings.publicUrl)
    const contract = this.reflector.get<Contract | undefined>(CONTRACT, context.getHandler())
    if (!contract)
      throw new ProblemError('forbidden', 'This address declares no permission, so nobody may use it.')
    request.actor = await this.sessions.actorOf(request)
    if (contract.permission === 'public') return true
    if (!request.actor) {
      throw new ProblemError(
        'signed-out',
        'You are signed out. Sign in again; what you typed is still on the page.',
      )
    }
    if (contract.permission === 'signed-in') return true
    if (!can(request.actor, contract.permission)) {
      throw new ProblemError('forbidden', 'Your role does not allow this.')
    }
    return true
  }
}
