import { createHash, randomBytes } from 'node:crypto'
import { Injectable } from '@nestjs/common'
import { type Executor, MailService, ProblemError, Settings, type Trx } from '../../platform/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { invitationMail } from './mails/invitation.mail.js'
import { resetMail } from './mails/reset.mail.js'
import { TokensRepository, type TokenKind, type TokenRow } from './tokens.repository.js'

const HOURS: Record<TokenKind, number> = { invitation: 7 * 24, reset: 1 }
const MAILS: Record<TokenKind, typeof invitationMail> = { invitation: invitationMail, reset: resetMail }

export interface LinkHolder {
  id: string
  name: string
  email: string
}

/** Links that let their reader choose a passphrase, once and for a time. */
@Injectable()
export class LinksService {
  constructor(
    private readonly tokens: TokensRepository,
    private readonly mail: MailService,
    private readonly laboratory: LaboratoryService,
    private readonly settings: Settings,
  ) {}

  /** Ends earlier links and mails a new one. @returns the link, which nobody can read again */
  async send(
    trx: Trx,
    { kind, to, startedBy }: { kind: TokenKind; to: LinkHolder; startedBy: string | null },
  ): Promise<string> {
    await this.tokens.endAllOf(trx, to.id)
    const token = randomBytes(32).toString('base64url')
    const { id, expiresAt } = await this.tokens.insert(trx, {
      userId: to.id,
      kind,
      tokenHash: hashOf(token),
      hours: HOURS[kind],
    })
    const laboratory = await this.laboratory.find(trx)
    const link = `${this.settings.publicUrl}/${kind}/${token}`
    await this.mail.queue(trx, {
      key: `${kind}:${id}`,
      to: to.email,
      ...MAILS[kind]({
        name: to.name,
        startedBy,
        link,
        expiresAt,
        timeZone: laboratory?.timeZone ?? 'UTC',
        laboratoryName: laboratory?.name ?? 'the laboratory',
      }),
      about: { kind: 'user', id: to.id },
    })
    return link
  }

  /** @throws not-found when the link was used, replaced, ran out, or never was */
  async get(db: Executor, kind: TokenKind, token: string): Promise<TokenRow> {
    return demandLive(kind, await this.tokens.find(db, kind, hashOf(token)))
  }

  async lock(trx: Trx, kind: TokenKind, token: string): Promise<TokenRow> {
    return demandLive(kind, await this.tokens.lock(trx, kind, hashOf(token)))
  }

  async endAllOf(trx: Trx, userId: string): Promise<void> {
    await this.tokens.endAllOf(trx, userId)
  }

  async countRecent(db: Executor, userId: string, kind: TokenKind): Promise<number> {
    return this.tokens.countRecent(db, userId, kind)
  }
}

function demandLive(kind: TokenKind, row: TokenRow | undefined): TokenRow {
  if (row?.isLive && row.status === (kind === 'invitation' ? 'invited' : 'active')) return row
  throw new ProblemError(
    'not-found',
    kind === 'invitation'
      ? 'This invitation is no longer valid: it was used, replaced by a newer one, or ran out. Ask for a new one.'
      : 'This link is no longer valid: it was used, replaced by a newer one, or ran out. Ask for a new one.',
  )
}

function hashOf(token: string): string {
  return createHash('sha256').update(token).digest('hex')
}
