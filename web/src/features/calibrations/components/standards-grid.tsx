import type { MethodDefinition } from '@weirlight/shared/contracts'
import { Dropdown } from 'antd'
import { useMemo, useRef, useState } from 'react'
import { trueMinus, useLaboratoryTime } from '../../../lib'
import { KeyHints } from '../../../ui'
import { RunGrid, type CellChange, type CellState, type RunGridColumn } from '../../../ui/run-grid'
import { Tint } from '../../../ui/tint'
import type { MaterialRow } from '../api/calibration-queries'
import {
  cellName,
  cellText,
  CONCENTRATION,
  concentrationProblem,
  readingColumn,
  readingProblem,
  replicatesOf,
  setCell,
  type CalibrationDraft,
  type DraftAssessment,
  type DraftStandard,
} from '../draft/calibration-draft'
import { lotChoices } from '../draft/lots'
import { decimals, signedPercent } from '../draft/number-texts'
import { ChangeReason } from './change-reason'
import { ChoiceSelect } from './choice-select'

const SUBSCRIPTS = ['A₁', 'A₂', 'A₃', 'A₄', 'A₅'] as const

/** What a row without a lot is made from. */
function noLotWords({ role, concentration }: DraftStandard): string {
  if (role === 'second-source') return 'Choose the lot'
  return concentration !== '' && Number(concentration) === 0 ? 'reagent water' : 'the stock'
}

export interface StandardsGridProps {
  /** as committed */
  base: CalibrationDraft
  draft: CalibrationDraft
  /** with the cell that is being typed, for everything computed */
  live: DraftAssessment
  typed: ReadonlyMap<string, string>
  setTyped: (typed: ReadonlyMap<string, string>) => void
  change: (next: (draft: CalibrationDraft) => CalibrationDraft, reasons?: Record<string, string>) => void
  cellState: (rowKey: string, columnKey: string) => CellState
  definition: MethodDefinition
  materials: readonly MaterialRow[]
  askToLeaveOut: (standard: DraftStandard) => void
  askToRemove: (standard: DraftStandard) => void
}

interface Asking {
  changes: CellChange[]
  cells: string[]
  title: string
  anchor: Element | null
}

/** The standards with their replicate readings; everything beside the entries is computed as they are typed. */
export function StandardsGrid(props: StandardsGridProps) {
  const { base, draft, typed, setTyped, change, cellState } = props
  const frame = useRef<HTMLDivElement>(null)
  const [asking, setAsking] = useState<Asking | null>(null)
  const columns = useColumns(props)
  const nameOf = (standard: DraftStandard) =>
    standard.role === 'second-source'
      ? `second source, ${standard.concentration || '?'} mg/L`
      : `standard ${standard.concentration || '?'} mg/L`

  const valueOf = (rowKey: string, columnKey: string) =>
    typed.get(cellName(rowKey, columnKey)) ?? cellText(draft, rowKey, columnKey)

  const settle = (changes: readonly CellChange[], reasons: Record<string, string> = {}) => {
    const left = new Map(typed)
    for (const each of changes) left.delete(cellName(each.rowKey, each.columnKey))
    setTyped(left)
    change((current) => changes.reduce(setCell, current), reasons)
  }

  const onCommit = (changes: CellChange[]) => {
    const trimmed = changes.map((each) => ({ ...each, text: each.text.trim() }))
    const cells = trimmed
      .filter(({ rowKey, columnKey, text }) => {
        const saved = columnKey === CONCENTRATION ? '' : cellText(base, rowKey, columnKey)
        return saved !== '' && saved !== text
      })
      .map((each) => cellName(each.rowKey, each.columnKey))
    if (cells.length === 0) return settle(trimmed)
    setAsking({
      changes: trimmed,
      cells,
      title: titleOf(trimmed, cells, base),
      anchor: anchorOf(trimmed, cells),
    })
  }

  const titleOf = (changes: readonly CellChange[], cells: readonly string[], from: CalibrationDraft) => {
    const one = changes.find((each) => cells[0] === cellName(each.rowKey, each.columnKey))
    if (!one || cells.length > 1) return `${cells.length} saved readings change`
    const before = cellText(from, one.rowKey, one.columnKey)
    return one.text === '' ? `${before} is taken away` : `${before} becomes ${one.text}`
  }
  const anchorOf = (changes: readonly CellChange[], cells: readonly string[]) => {
    const one = changes.find((each) => cells[0] === cellName(each.rowKey, each.columnKey))
    const row = draft.standards.findIndex((standard) => standard.key === one?.rowKey)
    return frame.current?.querySelector(`[data-row="${row}"][data-column="${one?.columnKey ?? ''}"]`) ?? null
  }

  return (
    <div ref={frame} className="standards">
      <RunGrid<DraftStandard>
        label="Standards and their readings"
        rows={draft.standards}
        rowKey={(row) => row.key}
        rowName={nameOf}
        columns={columns}
        valueOf={valueOf}
        onChange={(changes) => {
          const next = new Map(typed)
          for (const each of changes) next.set(cellName(each.rowKey, each.columnKey), each.text)
          setTyped(next)
        }}
        onCommit={onCommit}
        cellState={cellState}
        check={(text, _, columnKey) =>
          columnKey === CONCENTRATION ? concentrationProblem(text) : readingProblem(text)
        }
        rowTone={(row) => (row.role === 'second-source' ? 'qc' : undefined)}
        footer={
          <KeyHints
            hints={[
              ['Enter', 'next reading down'],
              ['Tab', 'next column'],
              ['Ctrl V', 'pastes a column or block'],
              ['Esc', 'gives the cell its value back'],
            ]}
          />
        }
      />
      {asking && (
        <ChangeReason
          anchor={asking.anchor}
          title={asking.title}
          onReason={(reason) => {
            settle(asking.changes, Object.fromEntries(asking.cells.map((cell) => [cell, reason])))
            setAsking(null)
          }}
          onCancel={() => {
            const left = new Map(typed)
            for (const each of asking.changes) left.delete(cellName(each.rowKey, each.columnKey))
            setTyped(left)
            setAsking(null)
          }}
        />
      )}
    </div>
  )
}

function useColumns(props: StandardsGridProps): RunGridColumn<DraftStandard>[] {
  const { draft, live, definition, materials, change, askToLeaveOut, askToRemove } = props
  const { today } = useLaboratoryTime()
  const replicates = replicatesOf(draft)
  const day = today()
  const lots = useMemo(() => {
    const of = (kinds: readonly MaterialRow['kind'][]) =>
      lotChoices({ lots: materials, kinds, analyte: definition.analyte, today: day })
    return {
      standard: of(['working-standard']),
      'second-source': of(['second-source', 'control']),
    }
  }, [materials, definition.analyte, day])
  const setRow = (key: string, part: Partial<DraftStandard>) =>
    change((current) => ({
      ...current,
      standards: current.standards.map((each) => (each.key === key ? { ...each, ...part } : each)),
    }))
  const backOf = (row: DraftStandard) => live.readBack.get(row.key)
  return [
    { kind: 'entry', key: CONCENTRATION, title: 'Standard', unit: 'mg/L' },
    ...Array.from({ length: replicates }, (_, index): RunGridColumn<DraftStandard> => ({
      kind: 'entry',
      key: readingColumn(index),
      title: SUBSCRIPTS[index] ?? `A${index + 1}`,
      unit: `${definition.wavelengthNm} nm`,
    })),
    {
      kind: 'show',
      key: 'tint',
      title: 'Tint',
      isNarrow: true,
      cell: (row) => <Tint band={definition.band} absorbance={backOf(row)?.meanAbsorbance ?? null} />,
    },
    {
      kind: 'show',
      key: 'back',
      title: 'Read back',
      unit: 'mg/L',
      isNumber: true,
      text: (row) => trueMinus(decimals(backOf(row)?.concentration, 3)),
      wrap: (row, aligned) =>
        row.leftOutReason ? (
          <span className="is-left-out" title={`Left out: ${row.leftOutReason}`}>
            {aligned}
          </span>
        ) : (
          aligned
        ),
    },
    {
      kind: 'show',
      key: 'error',
      title: 'Error',
      isNumber: true,
      text: (row) => signedPercent(backOf(row)?.errorPercent),
    },
    {
      kind: 'show',
      key: 'lot',
      title: 'Made from',
      cell: (row) => (
        <ChoiceSelect
          isShort
          label={`Lot, ${row.role === 'second-source' ? 'second source' : `standard ${row.concentration}`}`}
          value={row.lotId}
          choices={lots[row.role]}
          none={noLotWords(row)}
          onChange={(lotId) => setRow(row.key, { lotId })}
        />
      ),
    },
    {
      kind: 'show',
      key: 'acts',
      title: <span className="visually-hidden">What to do with the row</span>,
      isNarrow: true,
      cell: (row) => {
        const name = row.role === 'second-source' ? 'second source' : `standard ${row.concentration || '?'}`
        const isLeftOut = row.leftOutReason !== ''
        return (
          <Dropdown
            trigger={['click']}
            menu={{
              items: [
                ...(row.role === 'second-source'
                  ? []
                  : [{ key: 'out', label: isLeftOut ? 'Take into the curve' : 'Leave out of the curve…' }]),
                { key: 'remove', label: 'Remove the row…', danger: true },
              ],
              onClick: ({ key }) => {
                if (key === 'remove') askToRemove(row)
                else if (isLeftOut) setRow(row.key, { leftOutReason: '' })
                else askToLeaveOut(row)
              },
            }}
          >
            <button type="button" className="bare" aria-label={`More for the ${name} mg/L`}>
              ⋯
            </button>
          </Dropdown>
        )
      },
    },
  ]
}
