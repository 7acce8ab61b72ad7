import type { CalibrationView } from '@weirlight/shared/contracts'
import { useLaboratoryTime } from '../../../lib'
import { Box } from '../../../ui'

type Correction = CalibrationView['corrections'][number]

/** What was changed by hand, old and new side by side: the first thing a signer reads. */
export function CorrectionsBox({ corrections }: { corrections: readonly Correction[] }) {
  const { at } = useLaboratoryTime()
  if (corrections.length === 0) return null
  return (
    <Box title={`Changed by hand: ${corrections.length}`}>
      <div className="table-wrap" tabIndex={0} role="region" aria-label="What was changed by hand">
        <table className="table">
          <thead>
            <tr>
              <th scope="col">What</th>
              <th scope="col" className="n">
                From
              </th>
              <th scope="col" className="n">
                To
              </th>
              <th scope="col">Why</th>
              <th scope="col">By</th>
              <th scope="col">At</th>
            </tr>
          </thead>
          <tbody>
            {corrections.map((each, index) => (
              <tr key={index}>
                <td>{each.what}</td>
                <td className="n">
                  <s>{each.from || '–'}</s>
                </td>
                <td className="n strong">{each.to || '–'}</td>
                <td>{each.reason}</td>
                <td>{each.by}</td>
                <td>{at(each.at)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </Box>
  )
}
