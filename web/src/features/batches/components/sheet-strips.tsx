import { useLaboratoryTime } from '../../../lib'
import { Strip } from '../../../ui'
import type { BatchView } from '../api/batch-queries'
import type { RunSheet } from '../hooks/use-run-sheet'
import { columnTitle, positionTitle, rowOf } from '../run-sheet/cells'

/** What the sheet must say before the work goes on: two people in one cell, no connection, an emptied reading. */
export function SheetStrips({ batch, sheet }: { batch: BatchView; sheet: RunSheet }) {
  const { clock } = useLaboratoryTime()
  const failed = sheet.queue.entries().filter((each) => each.state === 'failed')
  return (
    <div className="stuck">
      {batch.returnedReason !== '' && <Strip title="Sent back">{batch.returnedReason}</Strip>}
      {sheet.queue.isOffline && (
        <Strip title="No connection" isAlert>
          Go on typing: {sheet.queue.summary.charAt(0).toLowerCase() + sheet.queue.summary.slice(1)} They are
          sent by themselves when the server answers.
        </Strip>
      )}
      {sheet.clashes.map((clash) => {
        const row = rowOf(batch, clash.cell.rowKey)
        return (
          <Strip
            key={`${clash.cell.rowKey} ${clash.cell.columnKey}`}
            tone="above"
            isAlert
            title={`${row ? positionTitle(row) : 'A position'}, ${columnTitle(clash.cell.columnKey)}`}
            action={
              <span className="row">
                <button type="button" className="button" onClick={() => sheet.keepTheirs(clash)}>
                  Keep {clash.theirs.absorbance}
                </button>
                <button type="button" className="button" onClick={() => sheet.enterMine(clash)}>
                  Enter {clash.mine} instead
                </button>
              </span>
            }
          >
            You entered {clash.mine}; {clash.theirs.readBy.name} entered {clash.theirs.absorbance} at{' '}
            {clock(clash.theirs.readAt)}. Look at the tube, then choose.
          </Strip>
        )
      })}
      {failed.length > 0 && (
        <Strip
          tone="above"
          isAlert
          title="Not saved"
          action={
            <button
              type="button"
              className="button"
              onClick={() => sheet.queue.put(failed.map((each) => each.entry))}
            >
              Try again
            </button>
          }
        >
          {failed[0]?.error ?? sheet.queue.problem?.message ?? 'Some readings were refused.'}
        </Strip>
      )}
      {sheet.notices.map((sentence) => (
        <Strip
          key={sentence}
          isAlert
          action={
            <button type="button" className="button" onClick={sheet.forgetNotices}>
              Understood
            </button>
          }
        >
          {sentence}
        </Strip>
      ))}
    </div>
  )
}
