import { Injectable } from '@nestjs/common'
import { Database, notAllowedNow, SYSTEM, type Trx } from '../../platform/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { LinksService } from './links.service.js'
import { UsersRepository } from './users.repository.js'
import { UsersService } from './users.service.js'

export interface FirstAdministrator {
  email: string
  name: string
  /** used when the laboratory is not set up yet; the rest is filled in on the page */
  laboratory: { name: string; timeZone: string }
}

/** For whoever may log on to the server: the way in when nobody can invite anybody yet. */
@Injectable()
export class FirstAdministratorService {
  constructor(
    private readonly db: Database,
    private readonly users: UsersRepository,
    private readonly accounts: UsersService,
    private readonly links: LinksService,
    private readonly laboratory: LaboratoryService,
  ) {}

  /** @returns the invitation's link; the same goes out by mail */
  async invite({ email, name, laboratory }: FirstAdministrator): Promise<string> {
    return this.db.transaction(SYSTEM, 'user.invite-administrator', null, async (trx) => {
      await this.laboratory.setUp(trx, {
        ...laboratory,
        address: '',
        accreditation: 'Not accredited',
        email,
        phone: '',
      })
      const known = await this.users.findCredentials(trx, email)
      if (known) return this.inviteAgain(trx, { id: known.id, email })
      const account = { email, name, role: 'administrator', clientId: null } as const
      return (await this.accounts.inviteIn(trx, SYSTEM, account)).link
    })
  }

  private async inviteAgain(trx: Trx, { id, email }: { id: string; email: string }): Promise<string> {
    const user = await this.users.lock(trx, id)
    if (user?.status !== 'invited' || user.role !== 'administrator') {
      throw notAllowedNow(
        `There is an account for ${email} already. Ask for a new passphrase on the sign-in page.`,
      )
    }
    return this.links.send(trx, { kind: 'invitation', to: user, startedBy: null })
  }
}
