import { useMemo } from 'react'
import { useSession } from './session'
import {
  dayOf,
  formatInstant,
  formatInstantWithOffset,
  formatTime,
  nowText,
  offsetText,
  parseMoment,
  today,
} from './time'

/** Times as the laboratory writes them: `const time = useLaboratoryTime()`, then `time.at(row.collectedAt)`. */
export function useLaboratoryTime() {
  const { timeZone } = useSession()
  return useMemo(
    () => ({
      timeZone,
      at: (instant: string) => formatInstant(instant, timeZone),
      withOffset: (instant: string) => formatInstantWithOffset(instant, timeZone),
      clock: (instant: string) => formatTime(instant, timeZone),
      day: (instant: string) => dayOf(instant, timeZone),
      offset: (instant: string) => offsetText(timeZone, Date.parse(instant)),
      today: () => today(timeZone),
      nowText: () => nowText(timeZone),
      parse: (text: string) => parseMoment(text, timeZone),
    }),
    [timeZone],
  )
}
