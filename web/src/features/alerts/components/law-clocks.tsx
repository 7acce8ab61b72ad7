import { useLaboratoryTime, useNow } from '../../../lib'
import { Box, Clock } from '../../../ui'
import type { AlertView } from '../api/alert-queries'
import { isAnswered } from '../alert-words'

/**
 * What laws and house rules ask for, as data with its source. The product says; the agency decides. Whether a duty was
 * done is not known here, so a clock that has run out is not called late.
 */
export function LawClocks({ alert }: { alert: AlertView }) {
  const { at } = useLaboratoryTime()
  const now = useNow()
  return (
    <Box title="Clocks of laws and house rules">
      {alert.clocks.length === 0 ? (
        <p className="quiet">No clock is kept for this kind of limit.</p>
      ) : (
        <ul className="clock-list">
          {alert.clocks.map((clock) => (
            <li key={`${clock.duty}${clock.jurisdiction}`}>
              <div>
                <div className="strong">{clock.duty}</div>
                <div className="note">
                  {clock.jurisdiction} · {clock.source}
                </div>
              </div>
              <div className="clock-due">
                {clock.dueAt === null ? (
                  <span className="quiet">not started</span>
                ) : (
                  <>
                    {Date.parse(clock.dueAt) > now && !isAnswered(alert) && <Clock dueAt={clock.dueAt} />}
                    <div className="note">
                      {Date.parse(clock.dueAt) > now ? 'by' : 'ran out'} {at(clock.dueAt)}
                    </div>
                  </>
                )}
              </div>
            </li>
          ))}
        </ul>
      )}
      <p className="note clock-caution">
        Kept as data, dated, each with its source: check the current text. Whether a duty applies, and when it
        begins, is for the primacy agency and local rules to say.
      </p>
    </Box>
  )
}
