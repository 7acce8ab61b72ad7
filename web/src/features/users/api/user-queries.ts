import { listClients, listMethods, listUsers, type UserView } from '@weirlight/shared/contracts'
import { queryFor } from '../../../lib'

export type { UserView }
export type Authorisation = UserView['authorisations'][number]

/** people change themselves too (an invitation accepted, an address changed): asked again wherever it is shown */
export const usersQuery = { ...queryFor(listUsers), staleTime: 0 }
/** to choose from: the utility a client account belongs to, the method of an authorisation */
export const utilitiesQuery = queryFor(listClients)
export const methodChoicesQuery = queryFor(listMethods)

/** what a changed account makes old */
export const TOUCHES = [listUsers]
