import { useLaboratoryTime } from '../../../lib'
import type { BatchView } from '../api/batch-queries'

/** Printed below the sheet alone: what the window was, and lines for hand and pen. */
export function RunSheetFoot({ batch }: { batch: BatchView }) {
  const { withOffset, nowText } = useLaboratoryTime()
  return (
    <div className="only-print run-sheet-print">
      <p className="note">
        {batch.colourWindow &&
          `Read ${batch.colourWindow.fromMinutes} to ${batch.colourWindow.toMinutes} min after the colour reagent. `}
        Colour reagent added: {batch.colourStartedAt ? withOffset(batch.colourStartedAt) : '__________'}
        {' · '}printed {nowText()}
      </p>
      <table>
        <tbody>
          <tr>
            <td>Read by ______________________</td>
            <td>Date and time ______________________</td>
            <td>Remarks ________________________________</td>
          </tr>
        </tbody>
      </table>
    </div>
  )
}
