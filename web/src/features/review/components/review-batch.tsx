import { useQuery } from '@tanstack/react-query'
import {
  getBatch,
  listBatches,
  listResults,
  listSamples,
  releaseBatch,
  returnBatch,
  type BatchView,
} from '@weirlight/shared/contracts'
import { batchStates, STATE_MARKS } from '@weirlight/shared/states'
import { Button } from 'antd'
import { useState } from 'react'
import { useNavigate } from 'react-router-dom'
import { paths, useActor, useCall, useCan, useNotice } from '../../../lib'
import { Bar, Box, Columns, Criteria, Loaded, MarginPage, StatusTag, Strip } from '../../../ui'
import { ReasonDialog, SignDialog } from '../../../ui/dialogs'
import {
  aboveWords,
  batchNotes,
  batchQuery,
  FindingsBox,
  isUnanswered,
  ReadRunSheet,
  useBatchFacts,
} from '../../batches'
import { CorrectionsBox } from '../../calibrations'
import { reviewChecks } from '../review-checks'
import { ResultsTable } from './results-table'

const TOUCHES = [getBatch, listBatches, listResults, listSamples]

const LIST = { to: paths.review, label: 'Review' }

export function ReviewBatchById({ id }: { id: string }) {
  return (
    <Loaded query={useQuery(batchQuery(id))} skeleton="page" what="batch" back={LIST}>
      {(batch) => <ReviewBatch key={`${batch.id} ${batch.version}`} batch={batch} />}
    </Loaded>
  )
}

/** A submitted run for the person who answers for it: hand changes, failed checks, then the rest. */
function ReviewBatch({ batch }: { batch: BatchView }) {
  const may = useCan()
  const me = useActor()
  const notice = useNotice()
  const navigate = useNavigate()
  const facts = useBatchFacts(batch)
  const [asked, setAsked] = useState<'release' | 'return' | null>(null)
  const [rerun, setRerun] = useState<ReadonlySet<string>>(new Set())
  const release = useCall(releaseBatch, {
    invalidates: TOUCHES,
    onDone: (answer) => {
      notice.done(`${answer.number} released.`)
      return navigate(paths.review)
    },
  })
  const sendBack = useCall(returnBatch, {
    invalidates: TOUCHES,
    onDone: (answer) => {
      notice.done(`${answer.number} went back to the bench.`)
      return navigate(paths.review)
    },
  })
  const isToReview = batchStates.may(batch.state, 'release')
  const isReviewer = may('batches.review')
  const isOwn =
    batch.openedBy.id === me.userId ||
    batch.rows.some((row) => row.readings.some((reading) => reading.readBy.id === me.userId))
  const unanswered = batch.findingsList.filter(isUnanswered)
  const params = { id: batch.id }
  const toggle = (positionId: string) =>
    setRerun((current) => {
      const next = new Set(current)
      if (!next.delete(positionId)) next.add(positionId)
      return next
    })

  return (
    <MarginPage
      title={`Review ${batch.number}`}
      subtitle={batch.methodTitle}
      back={LIST}
      state={<StatusTag mark={STATE_MARKS.batch[batch.state]} />}
      facts={facts}
      notes={batchNotes(batch)}
      bar={
        <Bar
          lead={`${batch.samples} samples · ${aboveWords(batch.aboveLimit)} · ${changedWords(batch.corrections.length)}`}
          actions={
            isToReview &&
            isReviewer && (
              <>
                {batchStates.may(batch.state, 'return') && (
                  <Button onClick={() => setAsked('return')}>Send back</Button>
                )}
                {isOwn ? (
                  <span className="note">You read in this batch: somebody else must release it.</span>
                ) : (
                  <Button type="primary" onClick={() => setAsked('release')}>
                    Release with signature
                  </Button>
                )}
              </>
            )
          }
        />
      }
    >
      {!isToReview && (
        <Strip tone="quiet" title="Not to be reviewed now">
          This batch is {STATE_MARKS.batch[batch.state].word.toLowerCase()}.
        </Strip>
      )}
      <Columns
        side={
          <Box title="Checked by the record">
            <Criteria items={reviewChecks(batch)} />
          </Box>
        }
      >
        {batch.corrections.length === 0 ? (
          <Box title="Changed by hand">
            <p className="quiet">Nothing was changed by hand.</p>
          </Box>
        ) : (
          <CorrectionsBox corrections={batch.corrections} />
        )}
        {batch.findingsList.length === 0 ? (
          <Box title="Failed checks">
            <p className="quiet">Every check passed.</p>
          </Box>
        ) : (
          <FindingsBox findings={batch.findingsList} title="Failed checks and what was done" />
        )}
      </Columns>
      <div className="stack grid-gap">
        <ResultsTable
          batch={batch}
          {...(isToReview && isReviewer && !isOwn ? { rerun: { chosen: rerun, toggle } } : {})}
        />
        <Box title="The run">
          <ReadRunSheet batch={batch} />
        </Box>
      </div>
      <SignDialog
        isOpen={asked === 'release'}
        onClose={() => setAsked(null)}
        title={`Release ${batch.number}`}
        meaning="released"
        consequences={consequences(batch, rerun, unanswered.length)}
        actionLabel="Release"
        note={{ label: 'Comment of the review (may stay empty)' }}
        onSign={(passphrase, comment) =>
          release.mutateAsync({
            params,
            body: { passphrase, version: batch.version, comment, rerunPositionIds: [...rerun] },
          })
        }
      />
      <ReasonDialog
        isOpen={asked === 'return'}
        onClose={() => setAsked(null)}
        title={`Send ${batch.number} back to the bench`}
        consequences={[
          `${batch.openedBy.name} reads your reason and can read or correct again. Nothing is reported yet.`,
        ]}
        actionLabel="Send back"
        onConfirm={(reason) => sendBack.mutateAsync({ params, body: { version: batch.version, reason } })}
      />
    </MarginPage>
  )
}

function changedWords(changed: number): string {
  return changed === 0 ? 'nothing changed by hand' : `${changed} changed by hand`
}

function consequences(batch: BatchView, rerun: ReadonlySet<string>, unanswered: number): string[] {
  const reported = batch.rows.filter((row) => row.kind === 'sample' && !rerun.has(row.id))
  const above = reported.filter(
    ({ assessment: { verdict } }) => verdict === 'above' || verdict === 'conditional-above',
  ).length
  return [
    `${reported.length} ${reported.length === 1 ? 'result is' : 'results are'} released; certificates are made and mailed to the clients.`,
    ...(above > 0
      ? [
          `${above} ${above === 1 ? 'is a finding' : 'are findings'} above a limit: the client’s alert contacts are told at once.`,
        ]
      : []),
    ...(rerun.size > 0
      ? [
          `${rerun.size} ${rerun.size === 1 ? 'is' : 'are'} kept and not reported; they wait to be measured again.`,
        ]
      : []),
    ...(unanswered > 0
      ? [
          `${unanswered} failed ${unanswered === 1 ? 'check has' : 'checks have'} no word about what was done.`,
        ]
      : []),
  ]
}
