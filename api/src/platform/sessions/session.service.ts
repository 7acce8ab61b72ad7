import { Injectable } from '@nestjs/common'
import type { Actor } from '@weirlight/shared/permissions'
import type { FastifyRequest } from 'fastify'
import { Clock } from '../clock/clock.js'
import { Database } from '../database/database.js'
import type { Trx } from '../database/executor.js'
import { ActorsRepository } from './actors.repository.js'

export const IDLE_MINUTES = 30
export const ABSOLUTE_HOURS = 12
const IDLE = IDLE_MINUTES * 60_000
const ABSOLUTE = ABSOLUTE_HOURS * 3_600_000
const SEEN_EVERY = 60_000

/** Who is signed in, and for how long. */
@Injectable()
export class SessionService {
  constructor(
    private readonly db: Database,
    private readonly actors: ActorsRepository,
    private readonly clock: Clock,
  ) {}

  /** A fresh session id at every sign-in: an id planted before is worth nothing after. */
  async start(request: FastifyRequest, userId: string): Promise<void> {
    await request.session.regenerate()
    const now = this.clock.now().getTime()
    request.session.userId = userId
    request.session.signedInAt = now
    request.session.seenAt = now
    await request.session.save()
  }

  async end(request: FastifyRequest): Promise<void> {
    await request.session.destroy()
  }

  /** For an account that is disabled, changes its role or its passphrase. */
  async endAllOf(trx: Trx, userId: string): Promise<void> {
    await this.actors.endSessions(trx, userId)
  }

  /** When the session began and when it ends whatever is done. */
  limitsOf(request: FastifyRequest): { signedInAt: Date; endsAt: Date } {
    const started = request.session.signedInAt ?? this.clock.now().getTime()
    return { signedInAt: new Date(started), endsAt: new Date(started + ABSOLUTE) }
  }

  async actorOf(request: FastifyRequest): Promise<Actor | undefined> {
    const { userId, signedInAt, seenAt } = request.session
    if (!userId || signedInAt === undefined || seenAt === undefined) return undefined
    const now = this.clock.now().getTime()
    if (now - signedInAt >= ABSOLUTE || now - seenAt >= IDLE) {
      await request.session.regenerate()
      return undefined
    }
    const actor = await this.actors.findActive(this.db.fresh, userId)
    if (!actor) {
      await request.session.regenerate()
      return undefined
    }
    if (now - seenAt >= SEEN_EVERY) request.session.seenAt = now
    return actor
  }
}
