import {
  getCalibration,
  listCalibrations,
  submitCalibration,
  type CalibrationView,
} from '@weirlight/shared/contracts'
import { LIMITS } from '@weirlight/shared/limits'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Button } from 'antd'
import { useEffect, useMemo, useState } from 'react'
import { paths, ProblemError, useCall, useLaboratoryTime, useNotice } from '../../../lib'
import { useIsNarrow } from '../../../lib/use-is-narrow'
import { Bar, Cautions, Columns, MarginPage, StatusTag } from '../../../ui'
import { ConfirmDialog, ReasonDialog } from '../../../ui/dialogs'
import { LeaveDialog } from '../../../ui/form-problem'
import {
  assessDraft,
  cellName,
  cellText,
  replicatesOf,
  setCell,
  type CalibrationDraft,
  type DraftStandard,
} from '../draft/calibration-draft'
import { useBenchStock, type Method } from '../hooks/use-bench-facts'
import { useCalibrationDraft, WHOLE_SHEET } from '../hooks/use-calibration-draft'
import { useCellStates } from '../hooks/use-cell-states'
import { CalibrationFindings } from './calibration-findings'
import { CurveBox } from './curve-box'
import { SavedLine, SheetTrouble } from './sheet-trouble'
import { SetUpBox } from './set-up-box'
import { StandardsGrid } from './standards-grid'
import './calibrations.css'

/** A draft: set-up and readings on the left, what they come to on the right, all as typed. */
export function CalibrationWorkbench({ view, method }: { view: CalibrationView; method: Method }) {
  const sheet = useCalibrationDraft(view)
  const { draft, change } = sheet
  const isNarrow = useIsNarrow()
  const stock = useBenchStock()
  const notice = useNotice()
  const { at } = useLaboratoryTime()
  const [typed, setTyped] = useState<ReadonlyMap<string, string>>(new Map())
  const [asked, setAsked] = useState<{ what: 'submit' | 'leave-out' | 'remove'; row?: DraftStandard } | null>(
    null,
  )
  const submit = useCall(submitCalibration, {
    invalidates: [getCalibration, listCalibrations],
    onDone: () => notice.done(`${view.number} submitted for signature.`),
  })
  const { reset } = submit
  // what the server said of an earlier state of the sheet no longer stands
  useEffect(() => reset(), [draft, reset])
  const live = useMemo(() => assessDraft(withTyped(draft, typed), method), [draft, typed, method])
  const cells = useCellStates({ sheet, submitProblem: submit.error })

  const setPart = (part: Partial<CalibrationDraft>) => change((current) => ({ ...current, ...part }))
  const addRow = (role: DraftStandard['role']) => change((current) => withRow(current, role))
  const remove = (row: DraftStandard, reason?: string) => {
    const reasons = Object.fromEntries(
      row.readings.map((_, index) => [cellName(row.key, String(index + 1)), reason ?? '']),
    )
    change(
      (current) => ({ ...current, standards: current.standards.filter((each) => each.key !== row.key) }),
      reason ? reasons : {},
    )
  }
  const hasSavedReadings = (row: DraftStandard) =>
    sheet.base.standards.some((each) => each.key === row.key && each.readings.some((text) => text !== ''))
  const failed = live.criteria.filter((criterion) => criterion.outcome === 'fail')
  const read = draft.standards.reduce(
    (sum, row) => sum + row.readings.filter((text) => text.trim() !== '').length,
    0,
  )
  const submitNow = async () => {
    if (!(await sheet.save())) throw notSaved()
    await submit.mutateAsync({ params: { id: view.id }, body: { version: sheet.getVersion() } })
  }

  return (
    <MarginPage
      title={`Calibration ${view.number}`}
      subtitle={method.title}
      back={{ to: paths.calibrations, label: 'Calibrations' }}
      state={<StatusTag mark={STATE_MARKS.calibration[view.state]} />}
      facts={[
        { term: 'Prepared by', detail: `${view.preparedBy.name}, ${at(view.createdAt)}` },
        { term: 'Read at', detail: `${view.wavelengthNm} nm` },
        { term: 'Colour', detail: method.definition.colour },
        {
          term: 'Colour age when read',
          detail: `${method.definition.development.minMinutes} to ${method.definition.development.maxMinutes} min allowed`,
        },
      ]}
      notes={[
        <SavedLine key="saved" status={sheet.status} read={read} />,
        <p key="window">{method.definition.development.text}</p>,
        method.definition.cautions.length > 0 && <Cautions key="care" items={method.definition.cautions} />,
      ]}
      bar={
        <Bar
          lead={
            <>
              {draft.standards.length} rows · {read} readings
              {isNarrow && <SavedLine status={sheet.status} read={read} />}
            </>
          }
          actions={
            <Button type="primary" onClick={() => setAsked({ what: 'submit' })}>
              Submit for signature
            </Button>
          }
        />
      }
    >
      <SheetTrouble sheet={sheet} homeless={cells.homeless} />
      <div className="workbench">
        <Columns
          side={
            <CalibrationFindings
              stored={live.stored}
              criteria={live.criteria}
              diagnosis={live.diagnosis}
              refusal={live.refusal}
              definition={method.definition}
            />
          }
        >
          <SetUpBox
            draft={draft}
            change={setPart}
            instruments={stock.instruments}
            materials={stock.materials}
            definition={method.definition}
            errorOf={cells.fieldError}
          />
          <div>
            <StandardsGrid
              base={sheet.base}
              draft={draft}
              live={live}
              typed={typed}
              setTyped={setTyped}
              change={change}
              cellState={cells.stateOf}
              definition={method.definition}
              materials={stock.materials}
              askToLeaveOut={(row) => setAsked({ what: 'leave-out', row })}
              askToRemove={(row) => (hasSavedReadings(row) ? setAsked({ what: 'remove', row }) : remove(row))}
            />
          </div>
          <div className="row">
            <Button onClick={() => addRow('standard')} disabled={draft.standards.length >= LIMITS.standards}>
              Add a standard
            </Button>
            <Button
              onClick={() => addRow('second-source')}
              disabled={draft.standards.length >= LIMITS.standards}
            >
              Add a second source
            </Button>
            <Button onClick={() => change(widened)} disabled={replicatesOf(draft) >= LIMITS.replicates}>
              Add a reading column
            </Button>
          </div>
          <CurveBox live={live} definition={method.definition} />
        </Columns>
      </div>
      <ConfirmDialog
        isOpen={asked?.what === 'submit'}
        onClose={() => setAsked(null)}
        title={`Submit ${view.number} for signature`}
        consequences={[
          'It can no longer be changed; the QA manager signs it or sends it back.',
          ...(failed.length > 0
            ? [
                `Not met: ${failed.map((each) => each.what).join('; ')}. The signer will be asked to justify this.`,
              ]
            : []),
        ]}
        actionLabel="Submit"
        onConfirm={submitNow}
      />
      <ReasonDialog
        isOpen={asked?.what === 'leave-out'}
        onClose={() => setAsked(null)}
        title={`Leave ${asked?.row?.concentration ?? ''} mg/L out of the curve`}
        consequences={['Its readings stay on the sheet and in the record. The signer sees this first.']}
        label="Technical reason"
        actionLabel="Leave it out"
        onConfirm={(leftOutReason) =>
          change((current) => ({
            ...current,
            standards: current.standards.map((each) =>
              each.key === asked?.row?.key ? { ...each, leftOutReason } : each,
            ),
          }))
        }
      />
      <ReasonDialog
        isOpen={asked?.what === 'remove'}
        onClose={() => setAsked(null)}
        title={`Remove the row ${asked?.row?.concentration ?? ''} mg/L`}
        consequences={['Its readings are already saved: they stay in the history with your reason.']}
        actionLabel="Remove the row"
        isDangerous
        onConfirm={(reason) => asked?.row && remove(asked.row, reason)}
      />
      <ReasonDialog
        isOpen={asked === null && sheet.problem?.errors.some((each) => each.path === 'reason') === true}
        onClose={() => undefined}
        title="Why did saved readings change?"
        actionLabel="Save with this reason"
        onConfirm={(reason) => change((current) => ({ ...current }), { [WHOLE_SHEET]: reason })}
      />
      <LeaveDialog blocker={sheet.blocker} />
    </MarginPage>
  )
}

function notSaved(): ProblemError {
  return new ProblemError({
    code: 'not-allowed-now',
    status: 0,
    title: 'Not saved',
    detail: 'The sheet is not saved yet: see what is marked on it or said above it, then submit.',
  })
}

function withTyped(draft: CalibrationDraft, typed: ReadonlyMap<string, string>): CalibrationDraft {
  return [...typed].reduce((current, [cell, text]) => {
    const [rowKey = '', columnKey = ''] = cell.split(' ')
    return cellText(current, rowKey, columnKey) === text
      ? current
      : setCell(current, { rowKey, columnKey, text })
  }, draft)
}

function withRow(draft: CalibrationDraft, role: DraftStandard['role']): CalibrationDraft {
  const made: DraftStandard = {
    key: crypto.randomUUID(),
    role,
    concentration: '',
    lotId: null,
    readings: Array.from({ length: replicatesOf(draft) }, () => ''),
    leftOutReason: '',
  }
  // the second source stands below the standards
  const standards = [...draft.standards, made].toSorted(
    (a, b) => Number(a.role === 'second-source') - Number(b.role === 'second-source'),
  )
  return { ...draft, standards }
}

function widened(draft: CalibrationDraft): CalibrationDraft {
  const width = replicatesOf(draft) + 1
  return {
    ...draft,
    standards: draft.standards.map((row) => ({
      ...row,
      readings: Array.from({ length: width }, (_, index) => row.readings[index] ?? ''),
    })),
  }
}
