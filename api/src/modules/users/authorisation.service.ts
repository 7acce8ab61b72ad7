import { Injectable } from '@nestjs/common'
import { type Executor, notAllowedNow } from '../../platform/index.js'
import {
  AuthorisationsRepository,
  type AuthorisedActivity,
  type AuthorisedPerson,
} from './authorisations.repository.js'

const WORDS: Record<AuthorisedActivity, string> = {
  read: 'to measure by',
  'sign-calibration': 'to sign calibrations of',
  review: 'to review results of',
}

/** Who may do what by which method, on evidence and for a time. */
@Injectable()
export class AuthorisationService {
  constructor(private readonly authorisations: AuthorisationsRepository) {}

  async isAuthorised(
    db: Executor,
    asked: { userId: string; methodId: string; activity: AuthorisedActivity },
  ): Promise<boolean> {
    return (await this.authorisations.findBest(db, asked))?.inForce ?? false
  }

  /** Everyone active who may do it today, by any method. */
  async listInForce(db: Executor, activity: AuthorisedActivity): Promise<AuthorisedPerson[]> {
    return this.authorisations.listInForce(db, activity)
  }

  /** @throws not-allowed-now with a sentence that says what is missing */
  async requireAuthorised(
    db: Executor,
    asked: { userId: string; methodId: string; activity: AuthorisedActivity },
  ): Promise<void> {
    const best = await this.authorisations.findBest(db, asked)
    if (best?.inForce) return
    const title = (await this.authorisations.findMethodTitle(db, asked.methodId)) ?? 'this method'
    const what = `${WORDS[asked.activity]} “${title}”`
    if (!best) {
      throw notAllowedNow(`You are not authorised ${what}. An administrator records authorisations.`)
    }
    throw notAllowedNow(
      best.isAhead
        ? `Your authorisation ${what} begins on ${best.validFrom}.`
        : `Your authorisation ${what} ended on ${best.validUntil}. An administrator renews it.`,
    )
  }
}
