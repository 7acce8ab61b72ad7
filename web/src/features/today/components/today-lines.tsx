import type { getToday, ResponseOf } from '@weirlight/shared/contracts'
import { Link } from 'react-router-dom'
import { useLaboratoryTime } from '../../../lib/use-laboratory-time'
import { useNow } from '../../../lib/use-now'
import { Empty } from '../../../ui/page-states'
import { lineClockWords } from './line-clock'

type Line = ResponseOf<typeof getToday>['lines'][number]

/** The list of what needs a person; the server has put first what runs out first. */
export function TodayLines({ lines }: { lines: readonly Line[] }) {
  const now = useNow()
  const { withOffset } = useLaboratoryTime()
  if (lines.length === 0) {
    return (
      <div className="box">
        <Empty title="Nothing is waiting for you">
          A good moment to look after the bench, or to go home on time.
        </Empty>
      </div>
    )
  }
  return (
    <>
      <ul className="lines">
        {lines.map((line) => (
          <li key={line.key} className="line">
            <span
              className={`line-clock is-${line.tone}`}
              title={line.clock.at ? withOffset(line.clock.at) : undefined}
            >
              {lineClockWords(line.clock, now)}
            </span>
            <div>
              <div className="line-title">{line.title}</div>
              <div className="line-detail">{line.detail}</div>
            </div>
            <Link className="button" to={line.to} aria-label={`${line.action}: ${line.title}`}>
              {line.action}
            </Link>
          </li>
        ))}
      </ul>
      <p className="note lines-end">Nothing else is waiting for you.</p>
    </>
  )
}
