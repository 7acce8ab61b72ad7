import { getInstrument, listInstruments, type ResponseOf } from '@weirlight/shared/contracts'
import { queryFor } from '../../../lib'

export type InstrumentRow = ResponseOf<typeof listInstruments>['items'][number]
export type InstrumentView = ResponseOf<typeof getInstrument>
export type InstrumentCheck = InstrumentView['checks'][number]

export const instrumentsQuery = queryFor(listInstruments)
export const instrumentQuery = (id: string) => queryFor(getInstrument, { params: { id } })

/** what a changed instrument makes old */
export const TOUCHES = [getInstrument, listInstruments]
