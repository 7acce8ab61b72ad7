import type { Actor } from '@weirlight/shared/permissions'

/** Nobody in particular: a job, the sign-in before anybody is known, the first administrator's command. */
export interface SystemActor {
  readonly userId: null
  readonly name: string
  readonly role: 'system'
  readonly clientId: null
}

/** Whoever a change is written down for. */
export type Acting = Actor | SystemActor

export const SYSTEM: SystemActor = { userId: null, name: 'Weirlight', role: 'system', clientId: null }
