import {
  historyFilters,
  listClients,
  listHistory,
  listMethods,
  listProgrammes,
  listSeals,
  type HistoryRow,
} from '@weirlight/shared/contracts'
import { pagesFor, queryFor } from '../../../lib'

export type { HistoryRow }
export interface HistoryFilters {
  actorId: string
  thing: string
  thingId: string
  number: string
  action: string
  from: string
  to: string
}
export const NO_FILTERS: HistoryFilters = {
  actorId: '',
  thing: '',
  thingId: '',
  number: '',
  action: '',
  from: '',
  to: '',
}

export const historyPages = (filters: HistoryFilters) => pagesFor(listHistory, { query: { ...filters } })
export const filtersQuery = { ...queryFor(historyFilters), staleTime: 60_000 }
export const sealPages = () => pagesFor(listSeals, { query: {} })
/** names for the references that entries hold */
export const clientNamesQuery = queryFor(listClients)
export const methodNamesQuery = queryFor(listMethods)
export const limitNamesQuery = queryFor(listProgrammes)
