import {
  portalNow,
  portalResults,
  portalTrend,
  portalUtility,
  type AnalyteCode,
  type QueryInput,
  type ResponseOf,
} from '@weirlight/shared/contracts'
import { pagesFor, queryFor } from '../../../lib'
import type { FormCode } from '../../results'

export type Now = ResponseOf<typeof portalNow>
export type OwnAlert = Now['alerts'][number]
export type Utility = ResponseOf<typeof portalUtility>
export type Point = Utility['points'][number]

export const NO_FILTERS = { pointId: '', analyte: '', from: '', to: '' }
export type OwnFilters = typeof NO_FILTERS

const EVERY_MINUTE = 60_000
/** enough to find the last of everything at every point of one utility */
const LATEST = 200

export const nowQuery = { ...queryFor(portalNow), refetchInterval: EVERY_MINUTE }
export const ownResultPages = (filters: OwnFilters) =>
  pagesFor(portalResults, { query: filters as QueryInput<typeof portalResults> })
export const ownTrendQuery = (of: { pointId: string; analyte: AnalyteCode; form: FormCode }) =>
  queryFor(portalTrend, { query: of })
export const utilityQuery = queryFor(portalUtility)
export const latestQuery = queryFor(portalResults, { query: { limit: LATEST } })
export const latestAtPointQuery = (pointId: string) =>
  queryFor(portalResults, { query: { pointId, limit: LATEST } })
