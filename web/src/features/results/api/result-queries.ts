import {
  exportResults,
  getClient,
  getStory,
  listClients,
  listMethods,
  listResults,
  resultTrend,
  type AnalyteCode,
  type FORM_NAMES,
  type QueryInput,
  type ResponseOf,
  type ResultRow,
  type StoryView,
} from '@weirlight/shared/contracts'
import { hrefFor, pagesFor, queryFor } from '../../../lib'

export type { ResultRow, StoryView }
export type Trend = ResponseOf<typeof resultTrend>
export type FormCode = keyof typeof FORM_NAMES

/** Every filter of the list, as it stands in the address. */
export const NO_FILTERS = {
  clientId: '',
  pointId: '',
  methodId: '',
  analyte: '',
  verdict: '',
  state: '',
  from: '',
  to: '',
  sample: '',
}
export type ResultFilters = typeof NO_FILTERS

// an address may hold anything: the server says what it does not know
const asQuery = (filters: ResultFilters) => filters as QueryInput<typeof listResults>

export const resultPages = (filters: ResultFilters) => pagesFor(listResults, { query: asQuery(filters) })
export const exportHref = (filters: ResultFilters, format: 'xlsx' | 'csv') =>
  hrefFor(exportResults, { query: { ...asQuery(filters), format } })
export const trendQuery = (of: { pointId: string; analyte: AnalyteCode; form: FormCode }) =>
  queryFor(resultTrend, { query: of })
export const storyQuery = (id: string) => queryFor(getStory, { params: { id } })
export const clientsQuery = queryFor(listClients)
export const clientPointsQuery = (id: string) => queryFor(getClient, { params: { id } })
export const methodsQuery = queryFor(listMethods)
