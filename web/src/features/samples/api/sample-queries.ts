import {
  getSample,
  listSamples,
  listWaiting,
  type ResponseOf,
  type SampleView,
} from '@weirlight/shared/contracts'
import { pagesFor, queryFor } from '../../../lib'

export type { SampleView }
export type SampleRow = ResponseOf<typeof listSamples>['items'][number]
export type SampleState = SampleRow['state']
export type Determination = SampleView['details'][number]
export type Waiting = ResponseOf<typeof listWaiting>['items'][number]

export interface SampleFilters {
  state: string
  clientId: string
  pointId: string
  number: string
}

export const samplePages = (filters: SampleFilters) =>
  pagesFor(listSamples, { query: { ...filters, state: filters.state as SampleState } })
export const sampleQuery = (id: string) => queryFor(getSample, { params: { id } })
export const waitingQuery = (methodId: string) =>
  queryFor(listWaiting, { query: methodId === '' ? {} : { methodId } })

/** what a received, decided or corrected sample makes old */
export const TOUCHES = [getSample, listSamples, listWaiting]
