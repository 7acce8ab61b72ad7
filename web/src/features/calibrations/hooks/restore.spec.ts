import { describe, expect, it } from 'vitest'
import { setCell } from '../draft/calibration-draft'
import { aDraft, aStandard, aView } from '../draft/draft.test-support'
import { restore } from './use-calibration-draft'

// constructed throughout
const base = aDraft()
const view = aView(base, { version: 4 })

describe('a draft kept on this computer', () => {
  it('is forgotten when nothing in it is unsent', () => {
    const kept = { base, draft: base, version: 2, keys: {}, reasons: {} }
    expect(restore(view, kept).sheet).toMatchObject({ version: 4, keys: {} })
    expect(restore(view, null).sheet.draft.standards).toHaveLength(2)
  })

  it('is put on top of what the server has, with the version of the server', () => {
    const draft = setCell(base, { rowKey: 's1', columnKey: '1', text: '0.2001' })
    const theirs = aView({ ...base, note: 'changed by another' }, { version: 5 })
    const { sheet, clashes } = restore(theirs, {
      base,
      draft,
      version: 4,
      keys: {},
      reasons: { 's1 1': 'Read again' },
    })
    expect(sheet.version).toBe(5)
    expect(sheet.draft.note).toBe('changed by another')
    expect(sheet.draft.standards[0]?.readings[0]).toBe('0.2001')
    expect(sheet.base.standards[0]?.readings[0]).toBe('0.1994')
    expect(sheet.reasons).toEqual({ 's1 1': 'Read again' })
    expect(clashes).toEqual([])
  })

  it('knows its own rows again under the ids the server gave them', () => {
    const own = aDraft({ standards: [aStandard({ key: 'new-row' })] })
    const draft = setCell(own, { rowKey: 'new-row', columnKey: '2', text: '0.1985' })
    const fresh = aView(aDraft({ standards: [aStandard({ key: 's77' })] }))
    const { sheet } = restore(fresh, { base: own, draft, version: 1, keys: { '77': 'new-row' }, reasons: {} })
    expect(sheet.draft.standards).toHaveLength(1)
    expect(sheet.draft.standards[0]).toMatchObject({ key: 'new-row', readings: ['0.1994', '0.1985'] })
  })
})
