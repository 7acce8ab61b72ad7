import { setTimeout as pause } from 'node:timers/promises'
import { Injectable } from '@nestjs/common'
import type { BodyOf, ResponseOf, acceptInvitation, getInvitation } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import {
  Database,
  MailService,
  SessionService,
  SignInThrottle,
  SYSTEM,
  type Trx,
} from '../../platform/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { LinksService } from './links.service.js'
import { passphraseChangedMail } from './mails/passphrase-changed.mail.js'
import { PassphrasePolicy } from './passphrase-policy.js'
import type { TokenRow } from './tokens.repository.js'
import { UsersRepository } from './users.repository.js'

const RESETS_AN_HOUR = 3
/** longer than the work for a known address takes, so that the time taken tells nobody who has an account */
const ANSWER_AFTER = 250

/** Choosing a passphrase: with an invitation, or with a link for a new one. */
@Injectable()
export class InvitationsService {
  constructor(
    private readonly db: Database,
    private readonly users: UsersRepository,
    private readonly links: LinksService,
    private readonly policy: PassphrasePolicy,
    private readonly sessions: SessionService,
    private readonly throttle: SignInThrottle,
    private readonly laboratory: LaboratoryService,
    private readonly mail: MailService,
  ) {}

  async view(token: string): Promise<ResponseOf<typeof getInvitation>> {
    const row = await this.links.get(this.db.fresh, 'invitation', token)
    const laboratory = await this.laboratory.find(this.db.read)
    return {
      name: row.name,
      email: row.email,
      role: row.role,
      laboratoryName: laboratory?.name ?? 'Laboratory',
      clientName: row.clientName,
      expiresAt: row.expiresAt.toISOString(),
    }
  }

  async accept(token: string, { name, passphrase }: BodyOf<typeof acceptInvitation>): Promise<void> {
    const invited = await this.links.get(this.db.fresh, 'invitation', token)
    const passwordHash = await this.policy.accept(
      this.db.fresh,
      { ...invited, name: `${name} ${invited.name}` },
      passphrase,
    )
    const actor = { ...actorOf(invited), name }
    await this.db.transaction(actor, 'user.accept-invitation', null, async (trx) => {
      const { userId } = await this.links.lock(trx, 'invitation', token)
      await this.users.activate(trx, userId, { name, passwordHash })
      await this.links.endAllOf(trx, userId)
    })
  }

  /** Answers alike, in the same time, whether there is such an account or not. */
  async forget(email: string, address: string): Promise<void> {
    await this.throttle.begin(`forgot:${email}`, address)
    await Promise.all([this.sendReset(email), pause(ANSWER_AFTER)])
  }

  async reset(token: string, passphrase: string): Promise<void> {
    const owner = await this.links.get(this.db.fresh, 'reset', token)
    const passwordHash = await this.policy.accept(this.db.fresh, owner, passphrase)
    await this.db.transaction(actorOf(owner), 'user.reset-passphrase', null, async (trx) => {
      const { id, userId } = await this.links.lock(trx, 'reset', token)
      await this.users.updatePassphrase(trx, userId, passwordHash)
      await this.links.endAllOf(trx, userId)
      await this.sessions.endAllOf(trx, userId)
      await this.tellChanged(trx, owner, id)
    })
  }

  private async sendReset(email: string): Promise<void> {
    const account = await this.users.findCredentials(this.db.fresh, email)
    if (account?.status !== 'active') return
    await this.db.transaction(SYSTEM, 'user.ask-reset', null, async (trx) => {
      if (!(await this.users.lock(trx, account.id))) return
      // a stranger who asks again and again fills nobody's mailbox
      if ((await this.links.countRecent(trx, account.id, 'reset')) >= RESETS_AN_HOUR) return
      await this.links.send(trx, { kind: 'reset', to: { ...account, email }, startedBy: null })
    })
  }

  private async tellChanged(trx: Trx, owner: TokenRow, tokenId: string): Promise<void> {
    const laboratory = await this.laboratory.find(trx)
    await this.mail.queue(trx, {
      key: `passphrase-changed:${tokenId}`,
      to: owner.email,
      ...passphraseChangedMail({ name: owner.name, laboratoryName: laboratory?.name ?? 'the laboratory' }),
      about: { kind: 'user', id: owner.userId },
    })
  }
}

function actorOf(row: TokenRow): Actor {
  return { userId: row.userId, name: row.name, role: row.role, clientId: row.clientId }
}
