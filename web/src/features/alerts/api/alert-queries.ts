import {
  cancelAlert,
  closeAlert,
  getAlert,
  getToday,
  listAlerts,
  listClients,
  portalNow,
  type AlertView,
  type QueryInput,
  type ResponseOf,
} from '@weirlight/shared/contracts'
import { pagesFor, queryFor, useCall } from '../../../lib'

export type { AlertView }
export type AlertRow = ResponseOf<typeof listAlerts>['items'][number]
export type Delivery = AlertView['deliveries'][number]

export const alertPages = (filters: { state: string; clientId: string }) =>
  pagesFor(listAlerts, { query: filters as QueryInput<typeof listAlerts> })
export const alertQuery = (id: string) => queryFor(getAlert, { params: { id } })
export const clientsQuery = queryFor(listClients)

/** An answered, closed or cancelled alert changes every list and count that speaks of it. */
const TOUCHES = [getAlert, listAlerts, getToday, portalNow]
export const useCloseAlert = () => useCall(closeAlert, { invalidates: TOUCHES })
export const useCancelAlert = () => useCall(cancelAlert, { invalidates: TOUCHES })
