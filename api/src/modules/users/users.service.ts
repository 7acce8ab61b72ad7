import { Injectable } from '@nestjs/common'
import type { BodyOf, UserView, authoriseUser, changeUser, inviteUser } from '@weirlight/shared/contracts'
import type { Actor, Role } from '@weirlight/shared/permissions'
import {
  type Acting,
  Database,
  type Executor,
  invalidInput,
  isUniqueViolation,
  notAllowedNow,
  notFound,
  ProblemError,
  SessionService,
  type Trx,
  assertVersion,
} from '../../platform/index.js'
import { AuthorisationsRepository, type AuthorisationRow } from './authorisations.repository.js'
import { LinksService } from './links.service.js'
import { SecondFactorsService } from './second-factors.service.js'
import { UsersRepository, type UserRow } from './users.repository.js'

interface Move {
  id: string
  version: number
  reason: string
}

/** Accounts: an administrator starts them, changes them, ends them; only their owners choose a passphrase. */
@Injectable()
export class UsersService {
  constructor(
    private readonly db: Database,
    private readonly users: UsersRepository,
    private readonly authorisations: AuthorisationsRepository,
    private readonly links: LinksService,
    private readonly sessions: SessionService,
    private readonly secondFactors: SecondFactorsService,
  ) {}

  async list(): Promise<{ items: UserView[] }> {
    const [users, authorisations] = await Promise.all([
      this.users.list(this.db.read),
      this.authorisations.list(this.db.read),
    ])
    const byUser = new Map<string, AuthorisationRow[]>()
    for (const row of authorisations) byUser.set(row.userId, [...(byUser.get(row.userId) ?? []), row])
    return { items: users.map((user) => toView(user, byUser.get(user.id) ?? [])) }
  }

  async invite(actor: Actor, body: BodyOf<typeof inviteUser>): Promise<UserView> {
    return this.db.transaction(actor, 'user.invite', null, async (trx) => {
      const { id } = await this.inviteIn(trx, actor, { ...body, clientId: body.clientId ?? null })
      return this.view(trx, id)
    })
  }

  /** @returns the link, for the command that makes the first administrator */
  async inviteIn(
    trx: Trx,
    actor: Acting,
    { email, name, role, clientId }: { email: string; name: string; role: Role; clientId: string | null },
  ): Promise<{ id: string; link: string }> {
    await this.requireClient(trx, clientId)
    const id = await this.users.insert(trx, { email, name, role, clientId }).catch((error: unknown) => {
      if (!isUniqueViolation(error, 'users_email')) throw error
      const message = 'There is an account with this address already.'
      throw new ProblemError('already-exists', message, {
        errors: [{ path: 'email', message }],
        cause: error,
      })
    })
    const startedBy = actor.userId === null ? null : actor.name
    const link = await this.links.send(trx, { kind: 'invitation', to: { id, name, email }, startedBy })
    return { id, link }
  }

  async inviteAgain(actor: Actor, { id, version }: Omit<Move, 'reason'>): Promise<UserView> {
    return this.db.transaction(actor, 'user.invite-again', null, async (trx) => {
      const user = await this.lock(trx, id, version)
      if (user.status !== 'invited') throw notAllowedNow('This person has accepted the invitation already.')
      await this.links.send(trx, { kind: 'invitation', to: user, startedBy: actor.name })
      return this.view(trx, id)
    })
  }

  /** Starts a new passphrase; the person chooses it with the link that is mailed. */
  async startReset(actor: Actor, { id, version, reason }: Move): Promise<UserView> {
    return this.db.transaction(actor, 'user.start-reset', reason, async (trx) => {
      const user = await this.lock(trx, id, version)
      if (user.status !== 'active') throw notAllowedNow('Only an active account can get a new passphrase.')
      await this.links.send(trx, { kind: 'reset', to: user, startedBy: actor.name })
      return this.view(trx, id)
    })
  }

  /** For a person who has lost the device: it may be in other hands, so the sessions end as well. */
  async takeOffSecondFactor(actor: Actor, { id, version, reason }: Move): Promise<UserView> {
    return this.db.transaction(actor, 'user.take-off-second-factor', reason, async (trx) => {
      const user = await this.lock(trx, id, version)
      if (id === actor.userId) throw notAllowedNow('Take off your own under Your account, with a code.')
      if (!user.secondFactorSince) throw notAllowedNow('This person has no second factor.')
      await this.secondFactors.takeOff(trx, user, { name: actor.name, reason })
      await this.sessions.endAllOf(trx, id)
      return this.view(trx, id)
    })
  }

  async change(actor: Actor, id: string, body: BodyOf<typeof changeUser>): Promise<UserView> {
    return this.db.transaction(actor, 'user.change', body.reason || null, async (trx) => {
      const administrators = await this.users.lockActiveAdministrators(trx)
      const user = await this.lock(trx, id, body.version)
      const next = { name: body.name, role: body.role, clientId: body.clientId ?? null }
      const losesRole = user.role === 'administrator' && next.role !== 'administrator'
      if (losesRole) refuseLoss(actor, user, { administrators, done: 'give up the role of administrator' })
      await this.requireClient(trx, next.clientId)
      await this.users.update(trx, id, next)
      if (next.role !== user.role || next.clientId !== user.clientId) await this.sessions.endAllOf(trx, id)
      return this.view(trx, id)
    })
  }

  async disable(actor: Actor, { id, version, reason }: Move): Promise<UserView> {
    return this.db.transaction(actor, 'user.disable', reason, async (trx) => {
      const administrators = await this.users.lockActiveAdministrators(trx)
      const user = await this.lock(trx, id, version)
      refuseLoss(actor, user, { administrators, done: 'be disabled' })
      if (user.status === 'disabled') throw notAllowedNow('This account is disabled already.')
      await this.users.updateStatus(trx, id, 'disabled')
      await this.sessions.endAllOf(trx, id)
      await this.links.endAllOf(trx, id)
      return this.view(trx, id)
    })
  }

  async enable(actor: Actor, { id, version, reason }: Move): Promise<UserView> {
    return this.db.transaction(actor, 'user.enable', reason, async (trx) => {
      const user = await this.lock(trx, id, version)
      if (user.status !== 'disabled') throw notAllowedNow('This account is not disabled.')
      const hasPassphrase = await this.users.hasPassphrase(trx, id)
      await this.users.updateStatus(trx, id, hasPassphrase ? 'active' : 'invited')
      if (!hasPassphrase) await this.links.send(trx, { kind: 'invitation', to: user, startedBy: actor.name })
      return this.view(trx, id)
    })
  }

  async authorise(actor: Actor, id: string, body: BodyOf<typeof authoriseUser>): Promise<UserView> {
    return this.db.transaction(actor, 'user.authorise', null, async (trx) => {
      const user = await this.users.lock(trx, id)
      if (!user) throw notFound('person')
      if (user.role === 'client') throw notAllowedNow('People of a client utility do no work at the bench.')
      if (!(await this.authorisations.findMethodTitle(trx, body.methodId))) {
        throw invalidInput([{ path: 'methodId', message: 'There is no such method.' }])
      }
      await this.authorisations.insert(trx, { ...body, userId: id })
      return this.view(trx, id)
    })
  }

  private async lock(trx: Trx, id: string, version: number): Promise<UserRow> {
    const row = await this.users.lock(trx, id)
    if (!row) throw notFound('person')
    await assertVersion(trx, { thing: 'users', id, has: row.version, sent: version })
    return row
  }

  private async view(db: Executor, id: string): Promise<UserView> {
    const user = await this.users.find(db, id)
    if (!user) throw notFound('person')
    return toView(user, await this.authorisations.list(db, id))
  }

  private async requireClient(db: Executor, clientId: string | null): Promise<void> {
    if (clientId === null || (await this.users.hasClient(db, clientId))) return
    throw invalidInput([{ path: 'clientId', message: 'There is no such utility.' }])
  }
}

/** The laboratory always keeps somebody who can manage it. */
function refuseLoss(
  actor: Actor,
  user: UserRow,
  { administrators, done }: { administrators: readonly string[]; done: string },
): void {
  if (user.id === actor.userId)
    throw notAllowedNow('You cannot do this to your own account. Ask another administrator.')
  if (user.role === 'administrator' && administrators.every((id) => id === user.id)) {
    throw notAllowedNow(`${user.name} is the last active administrator and cannot ${done}.`)
  }
}

function toView(user: UserRow, authorisations: readonly AuthorisationRow[]): UserView {
  return {
    ...user,
    createdAt: user.createdAt.toISOString(),
    lastSignedInAt: user.lastSignedInAt?.toISOString() ?? null,
    secondFactorSince: user.secondFactorSince?.toISOString() ?? null,
    authorisations: authorisations.map(({ userId: _, ...authorisation }) => authorisation),
  }
}
