import { getToday } from '@weirlight/shared/contracts'
import { queryFor } from '../../../lib/queries'

const EVERY_MINUTE = 60_000

/** What needs this person; also the counts of the navigation. */
export const todayQuery = { ...queryFor(getToday), refetchInterval: EVERY_MINUTE }
