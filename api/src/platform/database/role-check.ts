import { Injectable, type OnApplicationBootstrap } from '@nestjs/common'
import { Database } from './database.js'
import { RoleRepository } from './role.repository.js'

export interface RoleCheckOptions {
  /** the loader of the demonstration's past works with the owner's role, and only it */
  isOwnerAllowed: boolean
}

/** The application does not start with a role that could change what was written. */
@Injectable()
export class RoleCheck implements OnApplicationBootstrap {
  constructor(
    private readonly db: Database,
    private readonly roles: RoleRepository,
    private readonly options: RoleCheckOptions,
  ) {}

  async onApplicationBootstrap(): Promise<void> {
    if (this.options.isOwnerAllowed) return
    const { role, canChangeHistory } = await this.roles.describe(this.db.fresh)
    if (!canChangeHistory) return
    throw new Error(
      `The role “${role}” of DATABASE_URL can change history. Give the application a role of its own that owns nothing.`,
    )
  }
}
