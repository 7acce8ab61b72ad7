import type { ReactNode } from 'react'
import { Link } from 'react-router-dom'
import type { BatchView } from '../api/batch-queries'
import { paths, useLaboratoryTime } from '../../../lib'
import { Cautions, Clock, Signatures, type MaybeFact } from '../../../ui'

/** What a run stands on, for the margin of its page. */
export function useBatchFacts(batch: BatchView): MaybeFact[] {
  const { at } = useLaboratoryTime()
  return [
    batch.state === 'submitted' &&
      batch.reviewDueAt !== null && { term: 'Review', detail: <Clock dueAt={batch.reviewDueAt} /> },
    {
      term: 'Calibration',
      detail: (
        <>
          <Link to={paths.calibration(batch.calibrationId)}>{batch.calibrationNumber}</Link>
          {batch.calibrationValidUntil && (
            <>
              , <Clock dueAt={batch.calibrationValidUntil} soonHours={72} />
            </>
          )}
        </>
      ),
    },
    {
      term: 'Instrument and cell',
      detail: (
        <>
          <Link to={paths.instrument(batch.instrumentId)}>{batch.instrumentName}</Link> · {batch.wavelengthNm}{' '}
          nm · {batch.cellPathCm} cm
        </>
      ),
    },
    batch.reagentLots.length > 0 && {
      term: 'Reagent lots',
      detail: batch.reagentLots.map((lot, index) => (
        <span key={lot.id}>
          {index > 0 && ' · '}
          <Link to={paths.material(lot.id)}>
            {lot.name} <span className="nowrap">{lot.number}</span>
          </Link>
        </span>
      )),
    },
    {
      term: 'Analyst',
      detail: (
        <>
          {batch.openedBy.name}, opened <span className="nowrap">{at(batch.openedAt)}</span>
        </>
      ),
    },
    batch.submittedAt !== null && { term: 'Submitted', detail: at(batch.submittedAt) },
    batch.releasedAt !== null && { term: 'Released', detail: at(batch.releasedAt) },
  ]
}

/** Small print of the margin: who is here, the note, cautions, signatures. */
export function batchNotes(batch: BatchView): ReactNode[] {
  return [
    batch.note !== '' && <p key="note">{batch.note}</p>,
    batch.signatures.length > 0 && (
      <div key="signed">
        <strong>Signatures</strong>
        <Signatures items={batch.signatures} />
      </div>
    ),
    batch.cautions.length > 0 && <Cautions key="care" items={batch.cautions} />,
  ]
}

export function whoIsHere(names: readonly string[]): string | null {
  if (names.length === 0) return null
  const listed = names.length === 1 ? names[0] : `${names.slice(0, -1).join(', ')} and ${names.at(-1)}`
  return `${listed} ${names.length === 1 ? 'is' : 'are'} looking at this batch.`
}
