import { getInvitation, signIn, signOut, type BodyInput, type SessionView } from '@weirlight/shared/contracts'
import type { QueryClient } from '@tanstack/react-query'
import { call } from '../../../lib/call'
import { queryFor } from '../../../lib/queries'
import { sessionQuery } from '../../../lib/session'

export async function openSession(
  client: QueryClient,
  given: BodyInput<typeof signIn>,
): Promise<SessionView> {
  const session = await call(signIn, { body: given })
  client.setQueryData(sessionQuery.queryKey, { session })
  return session
}

/** Ends the session and forgets everything read with it: the page is loaded anew. */
export async function closeSession(signInPath: string): Promise<void> {
  await call(signOut, {}, { canAskToSignIn: false }).catch(() => undefined)
  window.location.assign(signInPath)
}

export const invitationQuery = (token: string) => queryFor(getInvitation, { params: { token } })
