import { listProgrammes, type ResponseOf } from '@weirlight/shared/contracts'
import { queryFor } from '../../../lib'

export type Programme = ResponseOf<typeof listProgrammes>['items'][number]
export type Limit = Programme['limits'][number]

export const programmesQuery = queryFor(listProgrammes)
