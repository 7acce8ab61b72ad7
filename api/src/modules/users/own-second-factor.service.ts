import { Injectable } from '@nestjs/common'
import type {
  BodyOf,
  ResponseOf,
  confirmSecondFactor,
  getSecondFactor,
  removeSecondFactor,
  startSecondFactor,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import {
  Database,
  notAllowedNow,
  notFound,
  ProblemError,
  SignInThrottle,
  type Trx,
} from '../../platform/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { deviceUri, newSecret, toBase32 } from './one-time-codes.js'
import { PassphraseHasher } from './passphrase-hasher.js'
import { SecondFactorsRepository } from './second-factors.repository.js'
import { SecondFactorsService } from './second-factors.service.js'
import { SecretBox } from './secret-box.js'
import { UsersRepository, type UserRow } from './users.repository.js'

/** Each person's own second factor: set up, confirmed by a code, taken off again. */
@Injectable()
export class OwnSecondFactorService {
  constructor(
    private readonly db: Database,
    private readonly users: UsersRepository,
    private readonly factors: SecondFactorsRepository,
    private readonly secondFactors: SecondFactorsService,
    private readonly hasher: PassphraseHasher,
    private readonly box: SecretBox,
    private readonly throttle: SignInThrottle,
    private readonly laboratory: LaboratoryService,
  ) {}

  async view({ userId }: Actor): Promise<ResponseOf<typeof getSecondFactor>> {
    const [user, row] = await Promise.all([
      this.users.find(this.db.fresh, userId),
      this.factors.find(this.db.fresh, userId),
    ])
    const since = user?.secondFactorSince?.toISOString() ?? null
    return { since, recoveryCodesLeft: since === null ? 0 : (row?.recoveryCodesLeft ?? 0) }
  }

  /** The secret counts once a code of it was shown; until then it may be made anew. */
  async start(
    actor: Actor,
    { passphrase }: BodyOf<typeof startSecondFactor>,
  ): Promise<ResponseOf<typeof startSecondFactor>> {
    return this.counted(actor, async () => {
      await this.demandPassphrase(actor, passphrase)
      const laboratory = await this.laboratory.find(this.db.read)
      const secret = newSecret()
      // a table without history: nothing of the account changes yet
      const user = await this.db.unwatched(async (trx) => {
        const user = await this.lockWithout(trx, actor)
        await this.factors.put(trx, user.id, this.box.seal(secret, user.id))
        return user
      })
      const issuer = laboratory?.name ?? 'Weirlight'
      return { secret: toBase32(secret), uri: deviceUri({ secret, account: user.email, issuer }) }
    })
  }

  async confirm(
    actor: Actor,
    { code }: BodyOf<typeof confirmSecondFactor>,
  ): Promise<ResponseOf<typeof confirmSecondFactor>> {
    return this.db.transaction(actor, 'user.set-up-second-factor', null, async (trx) => {
      const { id } = await this.lockWithout(trx, actor)
      if (!(await this.factors.find(trx, id))) throw notAllowedNow('This set-up was ended. Begin it again.')
      await this.secondFactors.takeDeviceCode(trx, id, code)
      await this.users.updateSecondFactor(trx, id, { isOn: true })
      return { recoveryCodes: await this.secondFactors.renewRecoveryCodes(trx, id) }
    })
  }

  async remove(actor: Actor, { passphrase, code }: BodyOf<typeof removeSecondFactor>): Promise<void> {
    await this.counted(actor, async () => {
      await this.demandPassphrase(actor, passphrase)
      await this.db.transaction(actor, 'user.remove-second-factor', null, async (trx) => {
        const user = await this.users.lock(trx, actor.userId)
        if (!user?.secondFactorSince) throw notAllowedNow('You have no second factor.')
        await this.secondFactors.take(trx, user.id, code)
        await this.secondFactors.takeOff(trx, user, null)
      })
    })
  }

  /** A try counts as wrong until all of it was right: a right passphrase must not clear the wrong codes behind it. */
  private async counted<T>({ userId }: Actor, act: () => Promise<T>): Promise<T> {
    const account = `second-factor:${userId}`
    const attempt = await this.throttle.begin(account, account)
    const done = await act()
    await this.throttle.succeed(attempt)
    return done
  }

  private async demandPassphrase({ userId }: Actor, passphrase: string): Promise<void> {
    const stored = await this.users.findPassphraseHash(this.db.fresh, userId)
    if (await this.hasher.verify(stored, passphrase)) return
    const message = 'This is not your passphrase. Nothing was changed.'
    throw new ProblemError('wrong-passphrase', message, { errors: [{ path: 'passphrase', message }] })
  }

  private async lockWithout(trx: Trx, { userId }: Actor): Promise<UserRow> {
    const user = await this.users.lock(trx, userId)
    if (!user) throw notFound('person')
    if (user.secondFactorSince)
      throw notAllowedNow('You have a second factor already. Take it off before you set up another.')
    return user
  }
}
