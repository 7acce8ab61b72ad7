import { getSecondFactor, listUsers } from '@weirlight/shared/contracts'
import { queryFor } from '../../../lib'

export const secondFactorQuery = { ...queryFor(getSecondFactor), staleTime: 0 }

/** what a second factor set up or taken off makes old */
export const TOUCHES = [getSecondFactor, listUsers]
