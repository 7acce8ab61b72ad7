import type { Assessment } from '@weirlight/shared/contracts'
import { durationWords, useLaboratoryTime, useNow, windowWords } from '../../../lib'
import { useIsNarrow } from '../../../lib/use-is-narrow'
import { Clock, NumberWithStory, StatusTag } from '../../../ui'
import type { RunGridColumn } from '../../../ui/run-grid'
import { Tint } from '../../../ui/tint'
import type { BatchView, PositionView } from '../api/batch-queries'
import { useIsPhone } from '../hooks/use-is-phone'
import { columnTitle, replicateColumns } from '../run-sheet/cells'
import {
  commonUnit,
  flagWords,
  KIND_WORDS,
  shownNumbers,
  UNIT_WORDS,
  verdictOf,
} from '../run-sheet/row-texts'

export interface SheetRow extends PositionView {
  live: Assessment
}

const ANALYTE_NAMES = { Fe: 'Iron', Cu: 'Copper', Mn: 'Manganese', Cr: 'Chromium' } as const
const MINUTE = 60_000

interface ColumnsInput {
  batch: BatchView
  rows: readonly SheetRow[]
  /** opens dilution and note of a row */
  edit?: (row: SheetRow, field: 'dilution' | 'note') => void
}

/** The columns of a run sheet, in the order the eye goes: which tube, its colour, its readings, what they come to. */
export function useRunColumns({ batch, rows, edit }: ColumnsInput): RunGridColumn<SheetRow>[] {
  const unit = commonUnit(rows)
  const isNarrow = useIsNarrow()
  const isPhone = useIsPhone()
  const inCell = (row: SheetRow) =>
    unit === null ? ` ${UNIT_WORDS[row.live.unit ?? row.reporting.displayUnit]}` : ''
  return [
    { kind: 'show', key: 'position', title: '#', isNarrow: true, cell: (row) => row.position },
    // the label of a control says its kind again: on a tablet the room goes to the readings
    ...(isNarrow
      ? []
      : [
          {
            kind: 'show' as const,
            key: 'kind',
            title: 'Kind',
            cell: (row: SheetRow) => <span className="quiet">{KIND_WORDS[row.kind]}</span>,
          },
        ]),
    { kind: 'show', key: 'label', title: 'Sample and point', cell: (row) => <Label row={row} /> },
    ...(batch.colourWindow && !isPhone
      ? [
          {
            kind: 'show' as const,
            key: 'age',
            title: 'Colour age',
            isNarrow: true,
            cell: (row: SheetRow) => <ColourAge row={row} batch={batch} />,
          },
        ]
      : []),
    ...replicateColumns(batch.replicates).map((key): RunGridColumn<SheetRow> => ({
      kind: 'entry',
      key,
      title: columnTitle(key),
      unit: `${batch.wavelengthNm} nm`,
    })),
    {
      kind: 'show',
      key: 'tint',
      title: 'Tint',
      isNarrow: true,
      cell: (row) => <Tint band={batch.band} absorbance={row.live.meanAbsorbance} />,
    },
    {
      kind: 'show',
      key: 'concentration',
      title: ANALYTE_NAMES[batch.analyte],
      ...(unit === null ? {} : { unit: UNIT_WORDS[unit] }),
      isNumber: true,
      text: (row) => shownNumbers(row, row.live).concentration,
      wrap: (row, aligned) => (
        <span
          title={row.live.concentration === null ? undefined : `${row.live.concentration} mg/L, unrounded`}
        >
          <NumberWithStory resultId={row.resultId} text={shownNumbers(row, row.live).concentration}>
            {aligned}
          </NumberWithStory>
          {inCell(row)}
        </span>
      ),
    },
    {
      kind: 'show',
      key: 'uncertainty',
      title: 'U, k = 2',
      ...(unit === null ? {} : { unit: UNIT_WORDS[unit] }),
      isNumber: true,
      text: (row) => shownNumbers(row, row.live).uncertainty,
      wrap: (_, aligned) => <span className="quiet">{aligned}</span>,
    },
    { kind: 'show', key: 'verdict', title: 'Verdict', cell: (row) => <VerdictCell row={row} /> },
    ...(edit
      ? [
          {
            kind: 'show' as const,
            key: 'edit',
            title: <span className="visually-hidden">Dilution and note</span>,
            isNarrow: true,
            cell: (row: SheetRow) => (
              <button
                type="button"
                className="run-edit no-print"
                aria-label={`Dilution and note of position ${row.position}`}
                title="Dilution and note"
                onClick={() => edit(row, 'dilution')}
              >
                ⋯
              </button>
            ),
          },
        ]
      : []),
  ]
}

function Label({ row }: { row: SheetRow }) {
  const isSample = row.kind === 'sample'
  return (
    <>
      <span className="run-label">
        {isSample ? (row.sampleNumber ?? row.label) : row.label}
        {isSample && row.pointName && <span className="quiet"> · {row.pointName}</span>}
      </span>
      {(Number(row.dilution) !== 1 || row.note !== '') && (
        <span className="run-extra copper">
          {Number(row.dilution) !== 1 && `diluted ${row.dilution} times`}
          {Number(row.dilution) !== 1 && row.note !== '' && ' · '}
          {row.note}
        </span>
      )}
      {row.holding && row.holding.state !== 'ok' && row.readings.length === 0 && (
        <span className="run-extra">
          <Clock dueAt={row.holding.dueAt} what="holding time" />
        </span>
      )}
    </>
  )
}

/** A read tube keeps the age it was read at; an unread one says where it stands now. */
function ColourAge({ row, batch }: { row: SheetRow; batch: BatchView }) {
  const now = useNow()
  const { clock } = useLaboratoryTime()
  const startedAt = row.colourStartedAt ?? batch.colourStartedAt
  const window = batch.colourWindow
  if (!startedAt || !window) return null
  const [first] = row.readings
  if (!first) {
    const { words, tone, isOpen } = windowWords({ startedAt, ...window }, now)
    const isClosing = isOpen && tone !== 'quiet'
    return (
      <span className={`is-${tone}`}>
        {isOpen && !isClosing ? `now ${durationWords(now - Date.parse(startedAt))}` : words}
      </span>
    )
  }
  const age = Date.parse(first.readAt) - Date.parse(startedAt)
  const isOutside = age < window.fromMinutes * MINUTE || age > window.toMinutes * MINUTE
  return (
    <span className={isOutside ? 'is-caution' : 'quiet'} title={`read at ${clock(first.readAt)}`}>
      {age < 0 ? `before the reagent, ${durationWords(age)}` : durationWords(age)}
    </span>
  )
}

function VerdictCell({ row }: { row: SheetRow }) {
  const verdict = verdictOf(row, row.live)
  if (!verdict) return null
  const flags = flagWords(row, row.live)
  return (
    <span className="verdict-cell" title={row.live.explanation || undefined}>
      <StatusTag mark={verdict.mark}>{verdict.words}</StatusTag>
      {flags.length > 0 && <span className="run-extra quiet">{flags.join(', ')}</span>}
    </span>
  )
}
