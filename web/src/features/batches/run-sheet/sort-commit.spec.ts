import { describe, expect, it } from 'vitest'
import { aBatch, aPosition, aReading } from './batch.test-support'
import { sortAfterStale, sortCommit, type Commit } from './sort-commit'

// constructed throughout
const TOMAS = { id: '12', name: 'Tomas Lindqvist' }
const batch = aBatch([
  aPosition({
    id: '201',
    readings: [aReading(1, '0.0307', { id: '1' }), aReading(2, '0.0317', { id: '2' })],
  }),
  aPosition({ id: '202', position: 6 }),
])
const sort = (commits: Partial<Commit>[], seen: Record<string, string | null> = {}) =>
  sortCommit({
    commits: commits.map((commit) => ({ rowKey: '201', columnKey: '1', text: '', how: 'typed', ...commit })),
    batch,
    seen: (cell) => seen[`${cell.rowKey} ${cell.columnKey}`],
  })

describe('what an entry does to the record', () => {
  it('a first reading goes at once', () => {
    expect(sort([{ rowKey: '202', text: ' 0.0157 ' }]).fresh).toEqual([
      { rowKey: '202', columnKey: '1', text: '0.0157', supersedes: null, source: 'typed' },
    ])
  })
  it('a saved reading changes only with a reason, and names the one it supersedes', () => {
    const { corrections, fresh } = sort([{ text: '0.0309' }])
    expect(fresh).toEqual([])
    expect(corrections).toEqual([
      { rowKey: '201', columnKey: '1', text: '0.0309', supersedes: '1', source: 'typed', before: '0.0307' },
    ])
  })
  it('the same text again is no change; a zero more is one, for it says how well it was read', () => {
    expect(sort([{ text: '0.0307' }]).settled).toHaveLength(1)
    expect(sort([{ text: '0.03070' }]).corrections).toHaveLength(1)
  })
  it('a saved reading is not emptied; an unsaved cell may be', () => {
    expect(sort([{ text: '' }]).emptied).toEqual([{ rowKey: '201', columnKey: '1' }])
    expect(sort([{ rowKey: '202', text: '' }]).settled).toHaveLength(1)
  })
  it.each(['0,0307', '9', 'abc'])('%s stays in its cell', (text) => {
    expect(sort([{ text }]).invalid).toHaveLength(1)
  })
  it('what somebody else saved since typing began is never overwritten unseen', () => {
    const { clashes, corrections } = sort([{ text: '0.0309' }], { '201 1': null })
    expect(corrections).toEqual([])
    expect(clashes).toMatchObject([{ mine: '0.0309', theirs: { id: '1', absorbance: '0.0307' } }])
  })
  it('a pasted block is sorted cell by cell', () => {
    const sorted = sort([
      { text: '0.0307', how: 'pasted' },
      { columnKey: '2', text: '0.0320', how: 'pasted' },
      { rowKey: '202', text: '0.0157', how: 'pasted' },
      { rowKey: '202', columnKey: '2', text: 'n/a', how: 'pasted' },
    ])
    expect(sorted.settled).toHaveLength(1)
    expect(sorted.corrections.map((each) => each.text)).toEqual(['0.0320'])
    expect(sorted.fresh).toMatchObject([{ text: '0.0157', source: 'pasted' }])
    expect(sorted.invalid).toMatchObject([{ rowKey: '202', columnKey: '2', text: 'n/a' }])
  })
})

describe('after a refusal because somebody else saved', () => {
  const entry = (rowKey: string, columnKey: string, text: string, supersedes: string | null) => ({
    rowKey,
    columnKey,
    text,
    supersedes,
    source: 'typed' as const,
  })
  const fresh = aBatch([
    aPosition({
      id: '201',
      readings: [aReading(1, '0.0307', { id: '1' }), aReading(2, '0.0320', { id: '8', readBy: TOMAS })],
    }),
    aPosition({ id: '202', position: 6, readings: [aReading(1, '0.0157', { id: '9' })] }),
  ])
  it('tells lost answers, untouched cells and true clashes apart', () => {
    const sorted = sortAfterStale(
      [
        entry('202', '1', '0.0157', null),
        entry('202', '2', '0.0159', null),
        entry('201', '1', '0.0310', '1'),
        entry('201', '2', '0.0317', null),
      ],
      fresh,
    )
    expect(sorted.same).toEqual([{ rowKey: '202', columnKey: '1' }])
    expect(sorted.again.map((each) => each.text)).toEqual(['0.0159', '0.0310'])
    expect(sorted.clashes).toMatchObject([{ mine: '0.0317', theirs: { id: '8', readBy: TOMAS } }])
  })
})
