import { describe, expect, it } from 'vitest'
import { moveFrom, parseBlock, planPaste, type GridShape } from './grid-moves'

// constructed: three rows, two columns, the middle row cannot be entered
const shape: GridShape = { rows: 3, columns: 2, isEditable: (row) => row !== 1 }

describe('moveFrom', () => {
  it.each([
    ['down', { row: 0, column: 0 }, { row: 2, column: 0 }],
    ['down', { row: 2, column: 0 }, { row: 0, column: 1 }],
    ['down', { row: 2, column: 1 }, null],
    ['up', { row: 2, column: 1 }, { row: 0, column: 1 }],
    ['up', { row: 0, column: 1 }, { row: 2, column: 0 }],
    ['up', { row: 0, column: 0 }, null],
    ['right', { row: 0, column: 0 }, { row: 0, column: 1 }],
    ['right', { row: 0, column: 1 }, null],
    ['left', { row: 2, column: 1 }, { row: 2, column: 0 }],
  ] as const)('%s from %o', (move, from, to) => {
    expect(moveFrom(shape, from, move)).toEqual(to)
  })
})

describe('parseBlock', () => {
  it('reads what a sheet puts on the clipboard', () => {
    expect(parseBlock('0.1\t0.2\r\n0.3\t0.4\r\n')).toEqual([
      ['0.1', '0.2'],
      ['0.3', '0.4'],
    ])
  })
  it('trims ordinary and unbreakable spaces and keeps a decimal comma for the check to name', () => {
    expect(parseBlock('\u00a00,12 \n')).toEqual([['0,12']])
  })
})

describe('planPaste', () => {
  it('fills down and right, passing over rows that cannot be entered', () => {
    expect(planPaste(shape, { row: 0, column: 0 }, [['a', 'b'], ['c']])).toEqual({
      cells: [
        { row: 0, column: 0, text: 'a' },
        { row: 0, column: 1, text: 'b' },
        { row: 2, column: 0, text: 'c' },
      ],
      left: [],
    })
  })
  it('names what has no cell', () => {
    expect(planPaste(shape, { row: 2, column: 1 }, [['a', 'b'], ['c']])).toEqual({
      cells: [{ row: 2, column: 1, text: 'a' }],
      left: ['b', 'c'],
    })
  })
  it('does not erase where the block is empty', () => {
    expect(planPaste(shape, { row: 0, column: 0 }, [[''], ['c']]).cells).toEqual([
      { row: 2, column: 0, text: 'c' },
    ])
  })
})
