/** Where the cursor goes in a grid of entry cells. Rows and columns are counted from 0 over entry columns alone. */
export interface GridShape {
  rows: number
  columns: number
  isEditable: (row: number, column: number) => boolean
}
export interface Position {
  row: number
  column: number
}
export type Move = 'down' | 'up' | 'left' | 'right'

/** `down` at the foot of a column goes on at the head of the next one, as a person reads a rack twice. */
export function moveFrom(shape: GridShape, from: Position, move: Move): Position | null {
  switch (move) {
    case 'down':
      return downFrom(shape, from)
    case 'up':
      return upFrom(shape, from)
    case 'right':
      return acrossFrom(shape, from, 1)
    case 'left':
      return acrossFrom(shape, from, -1)
  }
}

function downFrom(shape: GridShape, from: Position): Position | null {
  for (let column = from.column; column < shape.columns; column += 1) {
    for (let row = column === from.column ? from.row + 1 : 0; row < shape.rows; row += 1) {
      if (shape.isEditable(row, column)) return { row, column }
    }
  }
  return null
}

function upFrom(shape: GridShape, from: Position): Position | null {
  for (let column = from.column; column >= 0; column -= 1) {
    for (let row = column === from.column ? from.row - 1 : shape.rows - 1; row >= 0; row -= 1) {
      if (shape.isEditable(row, column)) return { row, column }
    }
  }
  return null
}

function acrossFrom(shape: GridShape, from: Position, step: 1 | -1): Position | null {
  for (let column = from.column + step; column >= 0 && column < shape.columns; column += step) {
    if (shape.isEditable(from.row, column)) return { row: from.row, column }
  }
  return null
}

/** Cells as a sheet puts them on the clipboard: tabs between columns, line ends between rows. */
export function parseBlock(text: string): string[][] {
  return text
    .replace(/(\r\n|\r|\n)+$/, '')
    .split(/\r\n|\r|\n/)
    .map((line) => line.split('\t').map((cell) => cell.replace(/\u00a0/g, ' ').trim()))
}

export interface PastePlan {
  cells: (Position & { text: string })[]
  /** values for which there was no cell */
  left: string[]
}

/**
 * Lays a block from the cell down and to the right. Rows that cannot be entered in the first column are passed over,
 * as Enter passes over them. An empty cell of the block changes nothing.
 */
export function planPaste(
  shape: GridShape,
  from: Position,
  block: readonly (readonly string[])[],
): PastePlan {
  const plan: PastePlan = { cells: [], left: [] }
  let row = from.row
  for (const line of block) {
    while (row < shape.rows && !shape.isEditable(row, from.column)) row += 1
    line.forEach((text, offset) => {
      if (text === '') return
      const column = from.column + offset
      const fits = row < shape.rows && column < shape.columns && shape.isEditable(row, column)
      if (fits) plan.cells.push({ row, column, text })
      else plan.left.push(text)
    })
    row += 1
  }
  return plan
}
