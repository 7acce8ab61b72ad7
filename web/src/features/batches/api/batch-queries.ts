import {
  getBatch,
  getMethod,
  listBatches,
  listWaiting,
  type BatchView,
  type MethodDefinition,
  type PositionView,
  type ResponseOf,
} from '@weirlight/shared/contracts'
import { pagesFor, queryFor } from '../../../lib'

export type BatchRow = ResponseOf<typeof listBatches>['items'][number]
export type BatchState = BatchRow['state']
export type WaitingDetermination = ResponseOf<typeof listWaiting>['items'][number]
export type BatchFinding = BatchView['findingsList'][number]
export type { BatchView, PositionView }

const ALL = 200

export const batchesInState = (state: BatchState) => queryFor(listBatches, { query: { state, limit: ALL } })
export const batchPages = (filters: { state: string; methodId: string }) =>
  pagesFor(listBatches, { query: { state: filters.state as BatchState, methodId: filters.methodId } })
export const batchQuery = (id: string) => queryFor(getBatch, { params: { id } })
export const waitingQuery = (methodId: string) =>
  queryFor(listWaiting, methodId === '' ? { query: {} } : { query: { methodId } })
export const methodDefinitionQuery = (id: string) => ({
  ...queryFor(getMethod, { params: { id } }),
  select: (method: ResponseOf<typeof getMethod>) => method.definition as unknown as MethodDefinition,
})
