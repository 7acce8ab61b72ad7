import { Injectable } from '@nestjs/common'
import type { signature } from '@weirlight/shared/contracts'
import { ROLE_NAMES, type Actor } from '@weirlight/shared/permissions'
import type { z } from 'zod'
import { Database, type Executor, ProblemError, SignInThrottle, type Trx } from '../../platform/index.js'
import { canonicalJson, sha256Of } from './canonical-json.js'
import { PassphraseHasher } from './passphrase-hasher.js'
import {
  SignaturesRepository,
  type Meaning,
  type SignatureRow,
  type SignedThing,
} from './signatures.repository.js'
import { UsersRepository } from './users.repository.js'

export type SignatureView = z.infer<typeof signature>

export interface ToSign {
  actor: Actor
  thing: SignedThing
  thingId: string
  meaning: Meaning
  /** exactly what was on the screen */
  content: unknown
}

/** Signatures: asked for with the passphrase again, over a hash of what was on the screen. */
@Injectable()
export class SigningService {
  constructor(
    private readonly db: Database,
    private readonly users: UsersRepository,
    private readonly signatures: SignaturesRepository,
    private readonly hasher: PassphraseHasher,
    private readonly throttle: SignInThrottle,
  ) {}

  /**
   * Asks whether the one who signs is the one who signed in. Before the transaction: hashing takes its time.
   * @throws wrong-passphrase on the field `passphrase`; throttled after several wrong ones
   */
  async confirmPassphrase(actor: Actor, passphrase: string): Promise<void> {
    const account = `signing:${actor.userId}`
    const attempt = await this.throttle.begin(account, account)
    const stored = await this.users.findPassphraseHash(this.db.fresh, actor.userId)
    const isRight = await this.hasher.verify(stored, passphrase)
    if (isRight) return this.throttle.succeed(attempt)
    const message = 'This is not your passphrase. Nothing was signed.'
    throw new ProblemError('wrong-passphrase', message, { errors: [{ path: 'passphrase', message }] })
  }

  /** In the transaction of the move that is signed. */
  async sign(trx: Trx, { actor, thing, thingId, meaning, content }: ToSign): Promise<SignatureView> {
    const row = await this.signatures.insert(trx, {
      thing,
      thingId,
      meaning,
      userId: actor.userId,
      printedName: actor.name,
      role: ROLE_NAMES[actor.role],
      content: canonicalJson(content),
      contentSha256: sha256Of(content),
    })
    return toView(row, true)
  }

  /**
   * Oldest first. With `currentContent`, made as it was when it was signed, a signature stands only while that
   * is unchanged; without, every signature is said to stand.
   */
  async list(
    db: Executor,
    thing: SignedThing,
    thingId: string,
    currentContent?: unknown,
  ): Promise<SignatureView[]> {
    const current = currentContent === undefined ? undefined : sha256Of(currentContent)
    const rows = await this.signatures.list(db, thing, thingId)
    return rows.map((row) => toView(row, current === undefined || current === row.contentSha256))
  }
}

function toView({ at, ...row }: SignatureRow, stands: boolean): SignatureView {
  return { ...row, at: at.toISOString(), stands }
}
