import { useRef, type ClipboardEvent, type FocusEvent, type KeyboardEvent } from 'react'
import { moveFrom, parseBlock, planPaste, type GridShape, type Move, type Position } from './grid-moves'
import type { CellChange } from './run-grid-types'

interface GridKeys {
  shape: GridShape
  /** a position's keys */
  keysAt: (position: Position) => { rowKey: string; columnKey: string } | null
  onChange: (changes: CellChange[]) => void
  onCommit: ((changes: CellChange[]) => void) | undefined
  onLeftOver: (values: string[]) => void
}

function positionOf(target: EventTarget): Position | null {
  if (!(target instanceof HTMLInputElement)) return null
  const { row, column } = target.dataset
  return row === undefined || column === undefined ? null : { row: Number(row), column: Number(column) }
}

function isWholeOrEdge(input: HTMLInputElement, edge: 'start' | 'end'): boolean {
  const { selectionStart: start, selectionEnd: end, value } = input
  if (start === 0 && end === value.length) return true
  return start === end && start === (edge === 'start' ? 0 : value.length)
}

function moveOf(event: KeyboardEvent<HTMLElement>, input: HTMLInputElement): Move | null {
  if (event.ctrlKey || event.metaKey || event.altKey) return null
  if (event.key === 'Enter') return event.shiftKey ? 'up' : 'down'
  if (event.shiftKey) return null
  if (event.key === 'ArrowDown') return 'down'
  if (event.key === 'ArrowUp') return 'up'
  // inside a number the arrows move between its digits
  if (event.key === 'ArrowLeft' && isWholeOrEdge(input, 'start')) return 'left'
  if (event.key === 'ArrowRight' && isWholeOrEdge(input, 'end')) return 'right'
  return null
}

/** Keyboard, paste and commit of a grid, as handlers of its table. */
export function useGridKeys({ shape, keysAt, onChange, onCommit, onLeftOver }: GridKeys) {
  const table = useRef<HTMLTableElement>(null)
  const before = useRef<{ text: string; how: CellChange['how'] }>({ text: '', how: 'typed' })

  const focus = (position: Position | null) => {
    if (!position) return
    table.current
      ?.querySelector<HTMLInputElement>(`input[data-row="${position.row}"][data-column="${position.column}"]`)
      ?.focus()
  }

  const onKeyDown = (event: KeyboardEvent<HTMLTableElement>) => {
    const position = positionOf(event.target)
    if (!position || !(event.target instanceof HTMLInputElement)) return
    if (event.nativeEvent.isComposing) return
    if (event.key === 'Escape') {
      const keys = keysAt(position)
      if (!keys || event.target.value === before.current.text) return
      event.preventDefault()
      return onChange([{ ...keys, text: before.current.text, how: 'typed' }])
    }
    const move = moveOf(event, event.target)
    if (!move) return
    event.preventDefault()
    const next = moveFrom(shape, position, move)
    if (next) focus(next)
    // at the last cell Enter still says “done with this one”
    else if (event.key === 'Enter') commit(event.target, position)
  }

  const commit = (input: HTMLInputElement, position: Position) => {
    const keys = keysAt(position)
    if (!keys || input.value === before.current.text) return
    before.current = { text: input.value, how: 'typed' }
    onCommit?.([{ ...keys, text: input.value, how: 'typed' }])
  }

  const onFocus = (event: FocusEvent<HTMLTableElement>) => {
    if (!positionOf(event.target) || !(event.target instanceof HTMLInputElement)) return
    before.current = { text: event.target.value, how: 'typed' }
    event.target.select()
  }

  const onBlur = (event: FocusEvent<HTMLTableElement>) => {
    const position = positionOf(event.target)
    if (!position || !(event.target instanceof HTMLInputElement)) return
    commit(event.target, position)
  }

  const onPaste = (event: ClipboardEvent<HTMLTableElement>) => {
    const position = positionOf(event.target)
    if (!position) return
    const block = parseBlock(event.clipboardData.getData('text'))
    const isOneCell = block.length === 1 && block[0]?.length === 1
    if (isOneCell) return
    event.preventDefault()
    const plan = planPaste(shape, position, block)
    const changes = plan.cells.flatMap((cell): CellChange[] => {
      const keys = keysAt(cell)
      return keys ? [{ ...keys, text: cell.text, how: 'pasted' }] : []
    })
    onLeftOver(plan.left)
    if (changes.length === 0) return
    const own = plan.cells.find((cell) => cell.row === position.row && cell.column === position.column)
    if (own) before.current = { text: own.text, how: 'pasted' }
    onChange(changes)
    onCommit?.(changes)
  }

  return { table, handlers: { onKeyDown, onFocus, onBlur, onPaste } }
}
