import { Injectable, Logger } from '@nestjs/common'
import type { BodyOf, SessionView, signIn } from '@weirlight/shared/contracts'
import type { Actor, Role } from '@weirlight/shared/permissions'
import type { FastifyRequest } from 'fastify'
import {
  Database,
  type Executor,
  IDLE_MINUTES,
  ProblemError,
  SessionService,
  SignInThrottle,
  type Try,
} from '../../platform/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { PassphraseHasher } from './passphrase-hasher.js'
import { SecondFactorsService } from './second-factors.service.js'
import { UsersRepository } from './users.repository.js'

export interface Account {
  id: string
  name: string
  role: Role
  clientId: string | null
  /** after a recovery code was used instead of the device */
  recoveryCodesLeft: number | null
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
    private readonly secondFactors: SecondFactorsService,
  ) {}

  /**
   * The same answer, in the same time, for an unknown address, an account not active and a wrong passphrase. A code is asked
   * for, and looked at, once the passphrase was right.
   */
  async authenticate({ email, password, code }: BodyOf<typeof signIn>, address: string): Promise<Account> {
    const attempt = await this.throttle.begin(email, address)
    const found = await this.users.findCredentials(this.db.fresh, email)
    const isActive = found?.status === 'active'
    const isRight = await this.hasher.verify(isActive ? found.passwordHash : null, password)
    const account = isActive && isRight ? found : undefined
    if (!account) {
      this.logger.warn({ address, knownAccount: found?.id ?? null }, 'A sign-in was refused')
      throw new ProblemError('wrong-passphrase', 'The e-mail address or the passphrase is not right.')
    }
    const recoveryCodesLeft = account.hasSecondFactor ? await this.takeCode(account.id, code, attempt) : null
    await this.throttle.succeed(attempt)
    const { id, name, role, clientId } = account
    return { id, name, role, clientId, recoveryCodesLeft }
  }

  async begin(request: FastifyRequest, account: Account): Promise<SessionView> {
    const { id: userId, name, role, clientId, recoveryCodesLeft: left } = account
    const actor: Actor = { userId, name, role, clientId }
    const how = left === null ? null : `With a recovery code, ${left} left`
    await this.db.transaction(actor, 'session.sign-in', how, (trx) =>
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

  /** A wrong code stays a wrong try; being asked for one is none. */
  private async takeCode(userId: string, code: string | undefined, attempt: Try): Promise<number | null> {
    if (code === undefined) {
      await this.throttle.withdraw(attempt)
      throw new ProblemError(
        'second-factor-needed',
        'This account has a second factor: enter the code that your device shows.',
      )
    }
    try {
      const taken = await this.db.unwatched((trx) => this.secondFactors.take(trx, userId, code))
      return taken.recoveryCodesLeft
    } catch (error) {
      if (error instanceof ProblemError)
        this.logger.warn({ address: attempt.address, account: userId }, 'A code was refused')
      throw error
    }
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
