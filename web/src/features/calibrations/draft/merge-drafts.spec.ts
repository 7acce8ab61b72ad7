import { describe, expect, it } from 'vitest'
import { aDraft, aStandard } from './draft.test-support'
import { mergeDrafts } from './merge-drafts'

// constructed throughout
const base = aDraft()

describe('two people in one draft', () => {
  it('takes what only the other changed and keeps what only I changed', () => {
    const mine = aDraft({ temperatureC: '21.5' })
    const theirs = aDraft({ note: 'lamp warmed 30 min' })
    const { draft, clashes } = mergeDrafts({ base, mine, theirs })
    expect(draft).toMatchObject({ temperatureC: '21.5', note: 'lamp warmed 30 min' })
    expect(clashes).toEqual([])
  })

  it('merges readings cell by cell', () => {
    const mine = aDraft({
      standards: [aStandard({ readings: ['0.1994', '0.1990'] }), ...base.standards.slice(1)],
    })
    const theirs = aDraft({
      standards: [aStandard({ readings: ['0.1899', '0.1982'] }), ...base.standards.slice(1)],
    })
    const { draft, clashes } = mergeDrafts({ base, mine, theirs })
    expect(draft.standards[0]?.readings).toEqual(['0.1899', '0.1990'])
    expect(clashes).toEqual([])
  })

  it('keeps mine and names the cell where both changed it differently', () => {
    const mine = aDraft({
      standards: [aStandard({ readings: ['0.1990', '0.1982'] }), ...base.standards.slice(1)],
    })
    const theirs = aDraft({
      standards: [aStandard({ readings: ['0.1999', '0.1982'] }), ...base.standards.slice(1)],
    })
    const { draft, clashes } = mergeDrafts({ base, mine, theirs })
    expect(draft.standards[0]?.readings[0]).toBe('0.1990')
    expect(clashes).toEqual(['s1 1'])
  })

  it('does not call it a clash when both entered the same', () => {
    const same = aDraft({ model: 'quadratic' })
    expect(mergeDrafts({ base, mine: same, theirs: same }).clashes).toEqual([])
  })

  it('keeps rows that either added', () => {
    const mine = aDraft({ standards: [...base.standards, aStandard({ key: 'mine', concentration: '3' })] })
    const theirs = aDraft({ standards: [...base.standards, aStandard({ key: 's9', concentration: '4' })] })
    const { draft } = mergeDrafts({ base, mine, theirs })
    expect(draft.standards.map((row) => row.key)).toEqual(['s1', 's2', 'mine', 's9'])
  })

  it('lets go of a row the other removed, unless I have read into it since', () => {
    const theirs = aDraft({ standards: base.standards.slice(0, 1) })
    expect(mergeDrafts({ base, mine: base, theirs }).draft.standards).toHaveLength(1)
    const read = aDraft({
      standards: [
        ...base.standards.slice(0, 1),
        aStandard({ key: 's2', concentration: '2.00', readings: ['0.3968', '0.3978', '0.3990'] }),
      ],
    })
    expect(mergeDrafts({ base, mine: read, theirs }).draft.standards).toHaveLength(2)
  })

  it('leaves out a row that I removed', () => {
    const mine = aDraft({ standards: base.standards.slice(1) })
    expect(mergeDrafts({ base, mine, theirs: base }).draft.standards.map((row) => row.key)).toEqual(['s2'])
  })
})
