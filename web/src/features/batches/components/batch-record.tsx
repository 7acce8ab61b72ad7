import { runSheetFile, type BatchView } from '@weirlight/shared/contracts'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Link } from 'react-router-dom'
import { hrefFor, paths, useCan } from '../../../lib'
import { Bar, MarginPage, StatusTag, Strip } from '../../../ui'
import { CorrectionsBox } from '../../calibrations'
import { batchNotes, useBatchFacts, whoIsHere } from './batch-margin'
import { FindingsBox } from './findings-box'
import { ReadRunSheet } from './read-run-sheet'

/** A batch that nobody types into: submitted, released, or looked at by somebody who only reads. */
export function BatchRecord({ batch }: { batch: BatchView }) {
  const may = useCan()
  const facts = useBatchFacts(batch)
  return (
    <MarginPage
      title={`Batch ${batch.number}`}
      subtitle={batch.methodTitle}
      back={{ to: paths.batches, label: 'Batches' }}
      state={<StatusTag mark={STATE_MARKS.batch[batch.state]} />}
      facts={facts}
      notes={[whoIsHere(batch.alsoHere), ...batchNotes(batch)]}
      bar={
        <Bar
          lead={`${batch.positions} positions · ${batch.samples} samples · ${aboveWords(batch.aboveLimit)}`}
          actions={
            <>
              <a className="button" href={hrefFor(runSheetFile, { params: { id: batch.id } })} download>
                Workbook
              </a>
              <button type="button" className="button" onClick={() => window.print()}>
                Print
              </button>
              {batch.state === 'submitted' && may('batches.review') && (
                <Link className="button main" to={paths.reviewBatch(batch.id)}>
                  Review
                </Link>
              )}
            </>
          }
        />
      }
    >
      {batch.returnedReason !== '' && <Strip title="Sent back">{batch.returnedReason}</Strip>}
      <div className="stack">
        <CorrectionsBox corrections={batch.corrections} />
        <FindingsBox findings={batch.findingsList} title="Checks and what was done" />
        <ReadRunSheet batch={batch} />
      </div>
    </MarginPage>
  )
}

export function aboveWords(above: number): string {
  return above === 0 ? 'none above a limit' : `${above} above a limit`
}
