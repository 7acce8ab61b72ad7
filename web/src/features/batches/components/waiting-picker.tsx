import { paths, useLaboratoryTime } from '../../../lib'
import { Clock, DataTable, StatusTag } from '../../../ui'
import type { WaitingDetermination } from '../api/batch-queries'
import { Link } from 'react-router-dom'

interface WaitingPickerProps {
  waiting: readonly WaitingDetermination[] | undefined
  /** as many as a batch of the method holds */
  batchSize: number
  value?: string[]
  onChange?: (value: string[]) => void
}

/** Waiting determinations, what runs out first at the head; chosen ones go into the batch in this order. */
export function WaitingPicker({ waiting, batchSize, value = [], onChange }: WaitingPickerProps) {
  const { at } = useLaboratoryTime()
  const chosen = new Set(value)
  const set = (ids: ReadonlySet<string>) =>
    onChange?.((waiting ?? []).map((row) => row.id).filter((id) => ids.has(id)))
  const toggle = (id: string) => {
    const next = new Set(chosen)
    if (!next.delete(id)) next.add(id)
    set(next)
  }
  return (
    <>
      {waiting && waiting.length > 0 && (
        <div className="row">
          <span className={chosen.size > batchSize ? 'caution' : 'quiet'}>
            {chosen.size} of {waiting.length} chosen
            {chosen.size > batchSize && `; the method asks for at most ${batchSize} samples in a batch`}
          </span>
          <button
            type="button"
            className="run-edit"
            onClick={() => set(new Set(waiting.slice(0, batchSize).map((row) => row.id)))}
          >
            The first {Math.min(batchSize, waiting.length)}
          </button>
          <button type="button" className="run-edit" onClick={() => set(new Set())}>
            None
          </button>
        </div>
      )}
      <DataTable<WaitingDetermination>
        label="Waiting determinations"
        rows={waiting}
        rowKey={(row) => row.id}
        rowTone={(row) => (chosen.has(row.id) ? 'now' : undefined)}
        columns={[
          {
            key: 'pick',
            title: <span className="visually-hidden">In the batch</span>,
            isNarrow: true,
            cell: (row) => (
              <label className="pick-cell">
                <input type="checkbox" checked={chosen.has(row.id)} onChange={() => toggle(row.id)} />
                <span className="visually-hidden">{row.sampleNumber}</span>
              </label>
            ),
          },
          {
            key: 'sample',
            title: 'Sample',
            onPhone: 'beside',
            cell: (row) => <Link to={paths.sample(row.sampleId)}>{row.sampleNumber}</Link>,
          },
          { key: 'clock', title: 'Holding time', cell: (row) => <Clock dueAt={row.holding.dueAt} /> },
          {
            key: 'point',
            title: 'Point',
            cell: (row) => (
              <>
                {row.pointName} <span className="quiet">· {row.clientName}</span>
              </>
            ),
          },
          { key: 'collected', title: 'Collected', text: (row) => at(row.collectedAt) },
          {
            key: 'state',
            title: 'Accepted',
            cell: (row) =>
              row.sampleState === 'accepted-with-qualification' ? (
                <StatusTag mark={{ word: 'with a qualification', shape: 'diamond', tone: 'caution' }} />
              ) : (
                <span className="quiet">yes</span>
              ),
          },
        ]}
        empty={{
          title: 'No determination waits for this method',
          text: 'Samples appear here once they are received and accepted.',
        }}
      />
    </>
  )
}
