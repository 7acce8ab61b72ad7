import type { CalibrationView } from '@weirlight/shared/contracts'
import { STATE_MARKS } from '@weirlight/shared/states'
import { useMemo } from 'react'
import { Link } from 'react-router-dom'
import { paths, useLaboratoryTime } from '../../../lib'
import { Bar, Box, Clock, Columns, MarginPage, Signatures, StatusTag, Strip } from '../../../ui'
import { assessDraft, draftOf } from '../draft/calibration-draft'
import type { Method } from '../hooks/use-bench-facts'
import { CalibrationActions } from './calibration-actions'
import { CalibrationFindings } from './calibration-findings'
import { CorrectionsBox } from './corrections-box'
import { CurveBox } from './curve-box'
import { MODEL_WORDS, WEIGHTING_WORDS } from './model-words'
import { StandardsTable } from './standards-table'

/** A calibration that is no draft: what a signer reads, and what the record keeps. */
export function CalibrationRecord({ view, method }: { view: CalibrationView; method: Method }) {
  const { at } = useLaboratoryTime()
  // recomputed on the page for curve and read-back; the numbers shown are those the server stored
  const live = useMemo(() => assessDraft(draftOf(view), method), [view, method])
  const leftOut = view.standards.filter((standard) => standard.leftOutReason !== '')
  const isRecomputedSame =
    !view.stored ||
    !live.stored ||
    (view.stored.slope === live.stored.slope && view.stored.intercept === live.stored.intercept)
  return (
    <MarginPage
      title={`Calibration ${view.number}`}
      subtitle={view.methodTitle}
      back={{ to: paths.calibrations, label: 'Calibrations' }}
      state={<StatusTag mark={STATE_MARKS.calibration[view.state]} />}
      facts={factsOf(view, at)}
      notes={[
        view.state === 'submitted' && (
          <p key="force">
            In force once signed, for {method.definition.calibrationMaxAgeDays.value} days or until the next
            reagent lot, service or failed verification, whichever comes first.
          </p>
        ),
        view.note !== '' && <p key="note">{view.note}</p>,
        <div key="signed">
          <strong>Signatures</strong>
          <Signatures items={view.signatures} />
        </div>,
      ]}
      bar={
        <Bar
          lead={whatWasChanged(view.corrections.length, leftOut.length)}
          actions={<CalibrationActions view={view} />}
        />
      }
    >
      {view.returnedReason && (
        <Strip title="Sent back">
          {view.returnedReason}
          {view.state === 'rejected' &&
            ' The technician starts over from a copy; this one stays in the record.'}
        </Strip>
      )}
      {view.endedReason !== '' && <Strip title="Taken out of force">{view.endedReason}</Strip>}
      {view.justification !== '' && (
        <Strip tone="quiet" title="Remark of the signer">
          {view.justification}
        </Strip>
      )}
      {view.replacedBy && (
        <Strip tone="quiet" title="Replaced">
          By <Link to={paths.calibration(view.replacedBy.id)}>{view.replacedBy.number}</Link>.
        </Strip>
      )}
      {!isRecomputedSame && (
        <Strip tone="above" isAlert title="Numbers differ">
          Computed again from the readings, this curve is not the stored one. Do not sign; tell the
          administrator.
        </Strip>
      )}
      <Columns
        side={
          <CalibrationFindings
            stored={view.stored ?? live.stored}
            criteria={view.criteria.length > 0 ? view.criteria : live.criteria}
            diagnosis={live.diagnosis}
            refusal={live.refusal}
            definition={method.definition}
          />
        }
      >
        <CorrectionsBox corrections={view.corrections} />
        {leftOut.length > 0 && (
          <Box title="Left out of the curve">
            <ul className="plain-list">
              {leftOut.map((standard) => (
                <li key={standard.id}>
                  {standard.concentration} mg/L: {standard.leftOutReason}
                </li>
              ))}
            </ul>
          </Box>
        )}
        <CurveBox live={live} definition={method.definition} />
        <StandardsTable view={view} live={live} definition={method.definition} />
        {view.batches.length > 0 && (
          <Box title="Batches read with it">
            <p className="row">
              {view.batches.map((batch) => (
                <Link key={batch.id} to={paths.batch(batch.id)}>
                  {batch.number}
                </Link>
              ))}
            </p>
          </Box>
        )}
      </Columns>
    </MarginPage>
  )
}

function whatWasChanged(corrections: number, leftOut: number): string {
  const readings =
    corrections === 0
      ? 'No reading was corrected.'
      : corrections === 1
        ? 'One entry was changed by hand.'
        : `${corrections} entries were changed by hand.`
  const standards =
    leftOut === 0
      ? 'No standard was left out.'
      : leftOut === 1
        ? 'One standard was left out.'
        : `${leftOut} standards were left out.`
  return `${readings} ${standards}`
}

function factsOf(view: CalibrationView, at: (instant: string) => string) {
  return [
    {
      term: 'Prepared by',
      detail: `${view.preparedBy.name}, ${at(view.submittedAt ?? view.createdAt)}`,
    },
    view.validUntil !== null &&
      view.state === 'in-force' && {
        term: 'In force',
        detail: <Clock dueAt={view.validUntil} soonHours={72} />,
      },
    view.validFrom !== null && {
      term: 'Carried results',
      detail: `${at(view.validFrom)} to ${view.validUntil ? at(view.validUntil) : 'now'}`,
    },
    {
      term: 'Instrument and cell',
      detail: (
        <>
          <Link to={paths.instrument(view.instrumentId)}>{view.instrumentName}</Link> · {view.wavelengthNm} nm
          · {view.cellPathCm} cm
        </>
      ),
    },
    view.stockLotId !== null && {
      term: 'Standards from',
      detail: <Link to={paths.material(view.stockLotId)}>{view.stockLotNumber}</Link>,
    },
    {
      term: 'Second source',
      detail: secondSource(view),
    },
    view.reagentLots.length > 0 && {
      term: 'Reagent lots',
      detail: view.reagentLots.map((lot, index) => (
        <span key={lot.id}>
          {index > 0 && ' · '}
          <Link to={paths.material(lot.id)}>
            {lot.name} <span className="nowrap">{lot.number}</span>
          </Link>
        </span>
      )),
    },
    { term: 'Curve', detail: `${MODEL_WORDS[view.model]}, weights ${WEIGHTING_WORDS[view.weighting]}` },
    view.colourStartedAt !== null && { term: 'Colour reagent added', detail: at(view.colourStartedAt) },
    view.temperatureC !== '' && { term: 'Temperature', detail: `${view.temperatureC} °C` },
  ]
}

function secondSource(view: CalibrationView) {
  const lots = view.standards.filter(
    (standard) => standard.role === 'second-source' && standard.lotId !== null,
  )
  if (lots.length === 0) return <span className="caution">none named</span>
  return lots.map((standard) => (
    <Link key={standard.id} to={paths.material(standard.lotId ?? '')}>
      {standard.lotNumber}
    </Link>
  ))
}
