import { useId, useMemo, useState } from 'react'
import { Aligned, longestFraction } from '../aligned'
import { Strip } from '../sheet'
import { CellMark } from './cell-mark'
import type { GridShape, Position } from './grid-moves'
import type { EntryColumn, RunGridColumn, RunGridProps } from './run-grid-types'
import { useGridKeys } from './use-grid-keys'

const isEntry = <Row,>(column: RunGridColumn<Row>): column is EntryColumn<Row> => column.kind === 'entry'

/** A sheet of readings for the keyboard: see `KeyHints` for what the keys do. */
export function RunGrid<Row>(props: RunGridProps<Row>) {
  const { label, rows, rowKey, columns, onChange, onCommit, isReadOnly = false, onRowFocus, footer } = props
  const [leftOver, setLeftOver] = useState<readonly string[]>([])
  const [focused, setFocused] = useState<Position | null>(null)
  const entries = useMemo(() => columns.filter(isEntry), [columns])
  const places = new Map(
    columns.map((column) => [
      column.key,
      column.kind === 'show' && column.isNumber ? longestFraction(rows.map((row) => column.text?.(row))) : 0,
    ]),
  )
  const shape: GridShape = {
    rows: rows.length,
    columns: entries.length,
    isEditable: (row, column) => canEnter(rows[row], entries[column]),
  }
  const keys = useGridKeys({
    shape,
    keysAt: (position) => {
      const row = rows[position.row]
      const column = entries[position.column]
      return row !== undefined && column ? { rowKey: rowKey(row), columnKey: column.key } : null
    },
    onChange,
    onCommit,
    onLeftOver: setLeftOver,
  })

  return (
    <>
      {leftOver.length > 0 && (
        <Strip
          isAlert
          action={
            <button type="button" className="button" onClick={() => setLeftOver([])}>
              Understood
            </button>
          }
        >
          {leftOver.length === 1 ? 'One pasted value' : `${leftOver.length} pasted values`} had no cell and{' '}
          {leftOver.length === 1 ? 'was' : 'were'} left out: {leftOver.slice(0, 8).join(', ')}
          {leftOver.length > 8 && ' …'}
        </Strip>
      )}
      <div className="table-wrap">
        <table
          className="table grid"
          ref={keys.table}
          aria-label={label}
          {...keys.handlers}
          onFocus={(event) => {
            keys.handlers.onFocus(event)
            const { row, column } = (event.target as HTMLElement).dataset
            if (row === undefined) return
            setFocused({ row: Number(row), column: Number(column) })
            const focusedRow = rows[Number(row)]
            if (focusedRow !== undefined) onRowFocus?.(rowKey(focusedRow))
          }}
          onBlur={(event) => {
            keys.handlers.onBlur(event)
            setFocused(null)
          }}
        >
          <thead>
            <tr>
              {columns.map((column) => (
                <th key={column.key} scope="col" className={headClass(column)}>
                  {column.title}
                  {column.unit && <small>{column.unit}</small>}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {rows.map((row, index) => (
              <GridRow
                key={rowKey(row)}
                grid={props}
                row={row}
                index={index}
                entries={entries}
                places={places}
                focusedColumn={focused?.row === index ? focused.column : null}
                isReadOnly={isReadOnly}
              />
            ))}
          </tbody>
        </table>
      </div>
      {footer}
    </>
  )
}

function canEnter<Row>(row: Row | undefined, column: EntryColumn<Row> | undefined): boolean {
  if (row === undefined || !column) return false
  return column.isEditable?.(row) ?? true
}

function headClass<Row>(column: RunGridColumn<Row>): string | undefined {
  if (column.kind === 'entry') return 'n entry'
  const names = [
    column.isNumber && 'n',
    column.isNarrow && 'narrow',
    column.isSecondary && 'is-secondary',
  ].filter(Boolean)
  return names.length > 0 ? names.join(' ') : undefined
}

interface GridRowProps<Row> {
  grid: RunGridProps<Row>
  row: Row
  index: number
  entries: readonly EntryColumn<Row>[]
  places: ReadonlyMap<string, number>
  focusedColumn: number | null
  isReadOnly: boolean
}

function GridRow<Row>({ grid, row, index, entries, places, focusedColumn, isReadOnly }: GridRowProps<Row>) {
  const id = useId()
  const key = grid.rowKey(row)
  const errors = entries.flatMap((column, position) => {
    const text = grid.valueOf(key, column.key)
    const isBeingTyped = focusedColumn === position
    const own = isBeingTyped || text.trim() === '' ? null : (grid.check?.(text, row, column.key) ?? null)
    const error = grid.cellState?.(key, column.key).error ?? own
    return error ? [{ column, error }] : []
  })
  const tone = grid.rowTone?.(row)
  const names = [
    focusedColumn !== null ? 'is-now' : tone && `is-${tone}`,
    errors.length > 0 && 'has-errors',
  ].filter(Boolean)
  return (
    <>
      <tr className={names.join(' ') || undefined}>
        {grid.columns.map((column) =>
          column.kind === 'entry' ? (
            <td key={column.key} className="entry">
              <EntryCell
                grid={grid}
                row={row}
                rowIndex={index}
                column={column}
                columnIndex={entries.indexOf(column)}
                errorId={errors.some((each) => each.column === column) ? `${id}-${column.key}` : null}
                isReadOnly={isReadOnly}
              />
            </td>
          ) : (
            <td key={column.key} className={headClass(column)}>
              <ShowCell column={column} row={row} index={index} places={places.get(column.key) ?? 0} />
            </td>
          ),
        )}
      </tr>
      {errors.length > 0 && (
        <tr className="cell-errors">
          <td colSpan={grid.columns.length}>
            {errors.map(({ column, error }) => (
              <div key={column.key} id={`${id}-${column.key}`}>
                {column.title}: {error}
              </div>
            ))}
          </td>
        </tr>
      )}
    </>
  )
}

function ShowCell<Row>(props: {
  column: Exclude<RunGridColumn<Row>, EntryColumn<Row>>
  row: Row
  index: number
  places: number
}) {
  const { column, row, index, places } = props
  const text = column.text?.(row)
  const plain = column.isNumber && text ? <Aligned text={text} places={places} /> : (text ?? null)
  if (column.wrap && plain !== null) return column.wrap(row, plain)
  return column.cell ? column.cell(row, index) : plain
}

interface EntryCellProps<Row> {
  grid: RunGridProps<Row>
  row: Row
  rowIndex: number
  column: EntryColumn<Row>
  columnIndex: number
  errorId: string | null
  isReadOnly: boolean
}

function EntryCell<Row>(props: EntryCellProps<Row>) {
  const { grid, row, rowIndex, column, columnIndex, errorId, isReadOnly } = props
  const key = grid.rowKey(row)
  const text = grid.valueOf(key, column.key)
  if (isReadOnly || !canEnter(row, column)) return text === '' ? <span className="quiet">–</span> : text
  const state = grid.cellState?.(key, column.key)
  return (
    <span className="cell">
      <CellMark state={state?.error ? 'failed' : state?.saved} />
      <input
        className="cell-input"
        inputMode="decimal"
        autoComplete="off"
        spellCheck={false}
        enterKeyHint="next"
        data-row={rowIndex}
        data-column={columnIndex}
        aria-label={`${column.title}, ${grid.rowName(row)}`}
        aria-invalid={errorId !== null}
        aria-describedby={errorId ?? undefined}
        placeholder={column.placeholder ?? '–'}
        value={text}
        onChange={(event) =>
          grid.onChange([{ rowKey: key, columnKey: column.key, text: event.target.value, how: 'typed' }])
        }
      />
    </span>
  )
}
