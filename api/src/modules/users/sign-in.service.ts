import { Injectable, Logger } from '@nestjs/common'
import type { SessionView } from '@weirlight/shared/contracts'
import type { Actor, Role } from '@weirlight/shared/permissions'
import type { FastifyRequest } from 'fastify'
import {
  Database,
  type Executor,
  IDLE_MINUTES,
  ProblemError,
  SessionService,
  SignInThrottle,
} from '../../platform/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { PassphraseHasher } from './passphrase-hasher.js'
import { UsersRepository } from './users.repository.js'

export interface Account {
  id: string
  name: string
  role: Role
  clientId: string | null
}

@Injectable()
export class SignInService {
  private readonly logger = new Logger(SignInService.name)

  constructor(
    private readonly db: Database,
    private readonly users: UsersRepository,
    private readonly hasher: PassphraseHasher,
    private readonly throttle: SignInThrottle,
    private readonly sessions: SessionService,
    private readonly laboratory: LaboratoryService,
  ) {}

  /** The same answer, in the same time, for an unknown address, an account not active and a wrong passphrase. */
  async authenticate(email: string, passphrase: string, address: string): Promise<Account> {
    const attempt = await this.throttle.begin(email, address)
    const found = await this.users.findCredentials(this.db.fresh, email)
    const isActive = found?.status === 'active'
    const isRight = await this.hasher.verify(isActive ? found.passwordHash : null, passphrase)
    const account = isActive && isRight ? found : undefined
    if (account) {
      await this.throttle.succeed(attempt)
      return { id: account.id, name: account.name, role: account.role, clientId: account.clientId }
    }
    this.logger.warn({ address, knownAccount: found?.id ?? null }, 'A sign-in was refused')
    throw new ProblemError('wrong-passphrase', 'The e-mail address or the passphrase is not right.')
  }

  async begin(request: FastifyRequest, account: Account): Promise<SessionView> {
    const actor: Actor = { ...account, userId: account.id }
    await this.db.transaction(actor, 'session.sign-in', null, (trx) =>
      this.users.markSignedIn(trx, account.id),
    )
    await this.sessions.start(request, account.id)
    return this.view(this.db.fresh, request, account.id)
  }

  async end(request: FastifyRequest): Promise<void> {
    await this.sessions.end(request)
  }

  async current(request: FastifyRequest, actor: Actor | undefined): Promise<{ session: SessionView | null }> {
    return { session: actor ? await this.view(this.db.fresh, request, actor.userId) : null }
  }

  private async view(db: Executor, request: FastifyRequest, userId: string): Promise<SessionView> {
    const [user, laboratory] = await Promise.all([this.users.find(db, userId), this.laboratory.find(db)])
    if (!user) throw new ProblemError('signed-out', 'Please sign in.')
    const { signedInAt, endsAt } = this.sessions.limitsOf(request)
    return {
      userId: user.id,
      name: user.name,
      email: user.email,
      role: user.role,
      clientId: user.clientId,
      clientName: user.clientName,
      timeZone: laboratory?.timeZone ?? 'UTC',
      laboratoryName: laboratory?.name ?? 'Laboratory',
      signedInAt: signedInAt.toISOString(),
      endsAt: endsAt.toISOString(),
      idleMinutes: IDLE_MINUTES,
    }
  }
}
