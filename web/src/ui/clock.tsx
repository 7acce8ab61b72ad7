import { agoWords, dueTone, dueWords, windowWords } from '../lib/clock-words'
import { useLaboratoryTime } from '../lib/use-laboratory-time'
import { useNow } from '../lib/use-now'

interface ClockProps {
  dueAt: string
  /** hours before the end from which it is a caution */
  soonHours?: number
  /** put before the words, e.g. “review” */
  what?: string
}

/** A clock in words: `9 h 20 min left`, `late by 3 h`. The moment itself is in the tooltip and for screen readers. */
export function Clock({ dueAt, soonHours = 12, what }: ClockProps) {
  const now = useNow()
  const { withOffset } = useLaboratoryTime()
  const words = dueWords(dueAt, now)
  return (
    <time
      dateTime={dueAt}
      title={withOffset(dueAt)}
      className={`strong is-${dueTone(dueAt, now, soonHours)}`}
    >
      {what ? `${what}: ${words}` : words}
    </time>
  )
}

/** `3 h ago`, with the moment in the tooltip. */
export function Since({ at }: { at: string }) {
  const now = useNow()
  const { withOffset } = useLaboratoryTime()
  return (
    <time dateTime={at} title={withOffset(at)}>
      {agoWords(at, now)}
    </time>
  )
}

/** The colour of a rack against its reading window. */
export function ReadingWindow(props: { startedAt: string; fromMinutes: number; toMinutes: number }) {
  const now = useNow()
  const { words, tone } = windowWords(props, now)
  return <span className={`strong is-${tone}`}>{words}</span>
}
