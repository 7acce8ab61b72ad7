import {
  addVerification,
  getBatch,
  listBatches,
  runSheetFile,
  submitBatch,
  type BatchView,
} from '@weirlight/shared/contracts'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Button } from 'antd'
import { useRef, useState, type KeyboardEvent } from 'react'
import { Link } from 'react-router-dom'
import { hrefFor, paths, ProblemError, useCall, useNotice } from '../../../lib'
import { useIsNarrow } from '../../../lib/use-is-narrow'
import { Bar, KeyHints, MarginPage, ReadingWindow, Refused, StatusTag, Strip } from '../../../ui'
import { ConfirmDialog } from '../../../ui/dialogs'
import { RunGrid } from '../../../ui/run-grid'
import { ChangeReason, CorrectionsBox } from '../../calibrations'
import { useRunSheet } from '../hooks/use-run-sheet'
import { columnTitle, positionName, positionTitle, readingProblem, rowOf } from '../run-sheet/cells'
import { isUnanswered } from '../run-sheet/live-batch'
import { batchNotes, useBatchFacts, whoIsHere } from './batch-margin'
import { ColourClock } from './colour-clock'
import { FindingsBox } from './findings-box'
import { PositionDialog } from './position-dialog'
import { useRunColumns, type SheetRow } from './run-grid-columns'
import { RunSheetFoot } from './run-sheet-foot'
import { SheetStrips } from './sheet-strips'
import './batches.css'

interface Editing {
  row: SheetRow
  field: 'dilution' | 'note'
}

/** The run sheet of an open batch. */
export function RunSheetPage({ batch }: { batch: BatchView }) {
  const sheet = useRunSheet(batch)
  const isNarrow = useIsNarrow()
  const notice = useNotice()
  const frame = useRef<HTMLDivElement>(null)
  const [focusedRow, setFocusedRow] = useState<string | null>(null)
  const [editing, setEditing] = useState<Editing | null>(null)
  const [isSubmitting, setSubmitting] = useState(false)
  const [isMissingNamed, setMissingNamed] = useState(false)
  const columns = useRunColumns({
    batch,
    rows: sheet.rows,
    edit: (row, field) => setEditing({ row, field }),
  })
  const facts = useBatchFacts(batch)
  const verify = useCall(addVerification, {
    onDone: (answer) => {
      sheet.take(answer)
      notice.done('A verification standard and blank stand at the end of the run.')
    },
  })
  const submit = useCall(submitBatch, {
    invalidates: [getBatch, listBatches],
    onDone: (answer) => {
      sheet.take(answer)
      notice.done(`${batch.number} submitted for review.`)
    },
  })
  const unanswered = sheet.findings.filter(isUnanswered)
  const here = whoIsHere(batch.alsoHere)
  const next = sheet.missing[0]

  const focusCell = (rowKey: string, columnKey = '1') => {
    const index = sheet.rows.findIndex((row) => row.id === rowKey)
    const input = frame.current?.querySelector<HTMLInputElement>(
      `[data-row="${index}"][data-column="${Number(columnKey) - 1}"]`,
    )
    input?.focus()
    input?.scrollIntoView({ block: 'center' })
  }
  const correction = sheet.corrections[0]
  const anchor = correction
    ? (frame.current?.querySelector(
        `[data-row="${sheet.rows.findIndex((row) => row.id === correction.rowKey)}"][data-column="${Number(correction.columnKey) - 1}"]`,
      ) ?? null)
    : null

  // a cell takes digits, point, sign and exponent: other letters are free for what belongs to the row
  const onKeyDown = (event: KeyboardEvent) => {
    if (event.ctrlKey || event.metaKey || event.altKey) return
    const isCell = event.target instanceof HTMLInputElement && event.target.dataset['row'] !== undefined
    const field = { d: 'dilution', n: 'note' }[event.key.toLowerCase()] as Editing['field'] | undefined
    const row = sheet.rows.find((each) => each.id === focusedRow)
    if (!isCell || !field || !row) return
    event.preventDefault()
    setEditing({ row, field })
  }
  const ask = async () => {
    await sheet.queue.flush()
    if (sheet.missing.length > 0) return setMissingNamed(true)
    setMissingNamed(false)
    setSubmitting(true)
  }
  const submitNow = async () => {
    await sheet.queue.flush()
    if (!sheet.queue.settledNow()) throw unsaved()
    await submit.mutateAsync({ params: { id: batch.id }, body: { version: batch.version } })
  }

  return (
    <MarginPage
      title={`Batch ${batch.number}`}
      subtitle={batch.methodTitle}
      back={{ to: paths.batches, label: 'Batches' }}
      state={<StatusTag mark={STATE_MARKS.batch[batch.state]} />}
      facts={[
        batch.colourWindow && {
          term: 'Reading window',
          detail: <ColourClock batch={batch} isEditable take={sheet.take} />,
        },
        ...facts,
      ]}
      notes={[
        <div key="saved" role="status">
          <p>{sheet.queue.summary}</p>
          {here && <p>{here}</p>}
        </div>,
        ...batchNotes(batch),
      ]}
      bar={
        <Bar
          lead={
            <>
              {[
                `${sheet.rows.length} positions`,
                `${sheet.read} of ${sheet.cells} readings`,
                next && `next at position ${next.row.position}`,
              ]
                .filter(Boolean)
                .join(' · ')}
              {/* the margin that says it is folded away there */}
              {isNarrow && (
                <div className="no-print">
                  {sheet.queue.summary}{' '}
                  {batch.colourStartedAt && batch.colourWindow && (
                    <>
                      Colour: <ReadingWindow startedAt={batch.colourStartedAt} {...batch.colourWindow} />
                    </>
                  )}
                </div>
              )}
            </>
          }
          actions={
            <>
              <Link className="button" to={paths.batchUpload(batch.id)}>
                Load a file
              </Link>
              <a className="button" href={hrefFor(runSheetFile, { params: { id: batch.id } })} download>
                Workbook
              </a>
              <Button onClick={() => window.print()}>Print run sheet</Button>
              <Button
                loading={verify.isPending}
                onClick={() => verify.mutate({ params: { id: batch.id }, body: { version: batch.version } })}
              >
                Add a verification
              </Button>
              <Button type="primary" onClick={() => void ask()}>
                Submit for review
              </Button>
            </>
          }
        />
      }
    >
      <SheetStrips batch={batch} sheet={sheet} />
      <Refused problem={verify.error} reset={verify.reset} />
      {isMissingNamed && sheet.missing.length > 0 && (
        <Strip
          isAlert
          title="Not yet complete"
          action={
            next && (
              <button
                type="button"
                className="button"
                onClick={() => focusCell(next.row.id, next.columns[0] ?? '1')}
              >
                Go to position {next.row.position}
              </button>
            )
          }
        >
          These cells have no reading:
          <ul>
            {sheet.missing.map(({ row, columns: empty }) => (
              <li key={row.id}>
                {positionTitle(row)}: {empty.map(columnTitle).join(', ')}
              </li>
            ))}
          </ul>
        </Strip>
      )}
      {!isMissingNamed && unanswered[0] && (
        <Strip
          title={unanswered[0].position ? `Position ${unanswered[0].position}` : 'The run'}
          action={
            unanswered[0].positionId && (
              <button
                type="button"
                className="button no-print"
                onClick={() => focusCell(unanswered[0]?.positionId ?? '')}
              >
                Go to it
              </button>
            )
          }
        >
          {unanswered[0].what}
          {unanswered.length > 1 && ` And ${unanswered.length - 1} more, listed below the sheet.`}
        </Strip>
      )}
      <div ref={frame} onKeyDownCapture={onKeyDown}>
        <RunGrid<SheetRow>
          label={`Run sheet of ${batch.number}`}
          rows={sheet.rows}
          rowKey={(row) => row.id}
          rowName={positionName}
          columns={columns}
          valueOf={sheet.valueOf}
          onChange={sheet.onChange}
          onCommit={sheet.onCommit}
          cellState={sheet.cellState}
          check={readingProblem}
          rowTone={(row) => (row.kind === 'sample' ? undefined : 'qc')}
          onRowFocus={setFocusedRow}
          footer={
            <KeyHints
              hints={[
                ['Enter', 'next reading'],
                ['Tab', 'next column'],
                ['Ctrl V', 'pastes a column or block'],
                ['D', 'dilution'],
                ['N', 'note'],
              ]}
            />
          }
        />
      </div>
      <div className="stack grid-gap">
        <FindingsBox
          findings={sheet.findings}
          act={{ batchId: batch.id, take: sheet.take, goTo: focusCell, isReady: sheet.isAllSaved }}
        />
        <CorrectionsBox corrections={batch.corrections} />
      </div>
      <RunSheetFoot batch={batch} />
      {correction && (
        <ChangeReason
          key={sheet.corrections.length}
          anchor={anchor}
          title={correctionTitle(sheet.corrections.length, batch, correction)}
          onReason={sheet.correct}
          onCancel={sheet.leaveUncorrected}
        />
      )}
      {editing && (
        <PositionDialog
          row={rowOf(batch, editing.row.id) ?? editing.row}
          field={editing.field}
          onClose={() => setEditing(null)}
          onSaved={sheet.take}
        />
      )}
      <ConfirmDialog
        isOpen={isSubmitting}
        onClose={() => setSubmitting(false)}
        title={`Submit ${batch.number} for review`}
        consequences={[
          `All ${sheet.read} readings go to the reviewer. They can no longer be changed here unless the batch is sent back.`,
          ...(unanswered.length > 0
            ? [
                `Nothing is recorded about: ${unanswered.map((finding) => finding.what).join(' ')} The reviewer will ask; better say it now.`,
              ]
            : []),
        ]}
        actionLabel="Submit"
        onConfirm={submitNow}
      />
    </MarginPage>
  )
}

function correctionTitle(
  count: number,
  batch: BatchView,
  one: { rowKey: string; columnKey: string; before: string; text: string },
): string {
  if (count > 1) return `${count} saved readings change`
  const row = rowOf(batch, one.rowKey)
  return `Position ${row?.position ?? ''}, ${columnTitle(one.columnKey)}: ${one.before} becomes ${one.text}`
}

function unsaved(): ProblemError {
  return new ProblemError({
    code: 'not-allowed-now',
    status: 0,
    title: 'Not saved',
    detail:
      'Some readings have not reached the server yet. Wait for the connection, or look at the marked cells.',
  })
}
