import { getMaterial, listMaterials, type QueryInput, type ResponseOf } from '@weirlight/shared/contracts'
import { queryFor } from '../../../lib'

export type MaterialRow = ResponseOf<typeof listMaterials>['items'][number]
export type MaterialView = ResponseOf<typeof getMaterial>
export type MaterialKind = MaterialRow['kind']
export type MaterialFilters = QueryInput<typeof listMaterials>

export const materialsQuery = (filters: MaterialFilters = {}) => queryFor(listMaterials, { query: filters })
export const materialQuery = (id: string) => queryFor(getMaterial, { params: { id } })
