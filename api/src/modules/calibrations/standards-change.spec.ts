import { describe, expect, it } from 'vitest'
import { planStandards, type SavedStandard } from './standards-change.js'

// Constructed.
const saved = (id: string, concentration: string, texts: (string | null)[]): SavedStandard => ({
  id,
  position: Number(id),
  role: 'standard',
  concentration,
  lotId: null,
  leftOutReason: '',
  cells: new Map(texts.map((text, index) => [index + 1, { id: `${id}${index + 1}`, text }])),
})
const body = (concentration: string, readings: string[], id?: string) => ({
  ...(id === undefined ? {} : { id }),
  role: 'standard' as const,
  concentration,
  lotId: null,
  readings,
  leftOutReason: '',
})
const before = [
  saved('1', '0', ['0.001', '0.002']),
  saved('2', '1.00', ['0.197', '0.198']),
  saved('3', '2.00', ['0.394']),
]

describe('saving standards', () => {
  it('writes nothing where nothing changed, also with empty cells behind', () => {
    const plan = planStandards(before, [
      body('0', ['0.001', '0.002', '']),
      body('1.00', ['0.197', '0.198']),
      body('2.00', ['0.394', '']),
    ])
    expect(plan.removedIds).toEqual([])
    expect(plan.standards.flatMap(({ readings }) => readings)).toEqual([])
    expect(plan.standards.some(({ isReworded }) => isReworded)).toBe(false)
  })
  it('a changed cell supersedes, an emptied one too, a new one does not', () => {
    const plan = planStandards(before, [
      body('0', ['0.001', '']),
      body('1.00', ['0.199', '0.198']),
      body('2.00', ['0.394', '0.395']),
    ])
    expect(plan.standards.map(({ readings }) => readings)).toEqual([
      [{ replicate: 2, text: null, supersedesId: '12' }],
      [{ replicate: 1, text: '0.199', supersedesId: '21' }],
      [{ replicate: 2, text: '0.395', supersedesId: null }],
    ])
  })
  it('a cell that was emptied and filled again supersedes the emptying', () => {
    const plan = planStandards([saved('1', '0', [null])], [body('0', ['0.003'])])
    expect(plan.standards[0]?.readings).toEqual([{ replicate: 1, text: '0.003', supersedesId: '11' }])
  })
  it('a row taken out of the middle makes no corrections of those behind it', () => {
    const plan = planStandards(before, [body('0', ['0.001', '0.002']), body('2.00', ['0.394'])])
    expect(plan.removedIds).toEqual(['2'])
    expect(plan.standards.map(({ id, position, isReworded }) => [id, position, isReworded])).toEqual([
      ['1', 1, false],
      ['3', 2, true],
    ])
    expect(plan.standards.flatMap(({ readings }) => readings)).toEqual([])
  })
  it('a row put into the middle is new', () => {
    const plan = planStandards(before, [
      body('0', ['0.001', '0.002']),
      body('0.50', ['0.098']),
      body('1.00', ['0.197', '0.198']),
      body('2.00', ['0.394']),
    ])
    expect(plan.standards.map(({ id }) => id)).toEqual(['1', null, '2', '3'])
  })
  it('ids say which row is which, whatever their order', () => {
    const plan = planStandards(before, [body('2.00', ['0.394'], '3'), body('1.50', ['0.296'], '2')])
    expect(plan.removedIds).toEqual(['1'])
    expect(plan.standards.map(({ id, readings }) => [id, readings.length])).toEqual([
      ['3', 0],
      // 0.296 for 0.197, and the second reading emptied
      ['2', 2],
    ])
  })
})
