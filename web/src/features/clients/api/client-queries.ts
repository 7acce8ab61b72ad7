import { getClient, listClients, type ClientView, type ResponseOf } from '@weirlight/shared/contracts'
import { queryFor } from '../../../lib'

export type ClientRow = ResponseOf<typeof listClients>['items'][number]
export type Contact = ClientView['contacts'][number]
export type SamplingPoint = ClientView['points'][number]
export type { ClientView }

export const clientsQuery = queryFor(listClients)
export const clientQuery = (id: string) => queryFor(getClient, { params: { id } })

/** what a changed client makes old */
export const TOUCHES = [getClient, listClients]
