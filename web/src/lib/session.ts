import { getSession, type SessionView } from '@weirlight/shared/contracts'
import { can, type Action, type Actor, type Subject } from '@weirlight/shared/permissions'
import { createContext, useCallback, useContext } from 'react'
import { queryFor } from './queries'

export const sessionQuery = { ...queryFor(getSession), staleTime: 5 * 60_000 }

export const SessionContext = createContext<SessionView | null>(null)

/** The signed-in person; pages are only drawn when there is one. */
export function useSession(): SessionView {
  const session = useContext(SessionContext)
  if (!session) throw new Error('useSession outside a signed-in page')
  return session
}

export function useActor(): Actor {
  const { userId, name, role, clientId } = useSession()
  return { userId, name, role, clientId }
}

/** `const may = useCan()`, then `may('calibrations.sign', { preparedBy })`: hides what the server would refuse. */
export function useCan(): (action: Action, subject?: Subject) => boolean {
  const { userId, role, clientId } = useSession()
  return useCallback(
    (action, subject) => can({ userId, role, clientId }, action, subject),
    [userId, role, clientId],
  )
}
