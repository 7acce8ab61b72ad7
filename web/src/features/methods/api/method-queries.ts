import { getMethod, listMethods, type MethodRecord, type ResponseOf } from '@weirlight/shared/contracts'
import { queryFor } from '../../../lib'

export type MethodRow = ResponseOf<typeof listMethods>['items'][number]
export type MethodView = ResponseOf<typeof getMethod>

export const methodsQuery = queryFor(listMethods)
export const methodQuery = (id: string) => queryFor(getMethod, { params: { id } })

/** The catalogue entry; the server keeps it whole and as the catalogue wrote it. */
export const recordOf = (method: MethodView) => method.definition as unknown as MethodRecord
