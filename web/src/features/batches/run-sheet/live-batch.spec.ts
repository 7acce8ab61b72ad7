import { describe, expect, it } from 'vitest'
import { aBatch, aPosition, aReading, assessed } from './batch.test-support'
import { readingIn, rowOf } from './cells'
import { isUnanswered, liveBatch } from './live-batch'

// constructed throughout: a line of 0.2 per mg/L
const blank = aPosition({
  id: '201',
  position: 1,
  kind: 'blank',
  label: 'Verification blank',
  sampleNumber: null,
  limits: [],
})
const sample = aPosition({ id: '205', position: 5 })
const duplicate = aPosition({
  id: '206',
  position: 6,
  kind: 'duplicate',
  label: 'duplicate of S-26-04117',
  ofPositionId: '205',
  ofPosition: 5,
  limits: [],
})
const NOW = '2026-12-01T10:20:00-05:00'
const live = (texts: Record<string, string>, rows = [blank, duplicate, sample], part = {}) => {
  const batch = aBatch(rows, part)
  return liveBatch({
    batch,
    now: NOW,
    textOf: (rowKey, columnKey) =>
      texts[`${rowKey} ${columnKey}`] ?? readingIn(rowOf(batch, rowKey), columnKey)?.absorbance ?? '',
  })
}

describe('the run sheet as it is typed', () => {
  it('computes what stands in the cells, whether saved or not', () => {
    const { rows } = live({ '205 1': '0.2000', '205 2': '0.2000' })
    const row = rows.find((each) => each.id === '205')
    expect(row?.live.concentration).toBeCloseTo(1, 2)
    expect(row?.live.reportedText).toBe('1.0')
    expect(row?.live.verdict).toBe('above')
  })

  it('is the number the server stores for the same readings', () => {
    const read = aPosition({ readings: [aReading(1, '0.0821'), aReading(2, '0.0817')] })
    const server = assessed(aBatch([read]))
    expect(live({}, [read]).rows[0]?.live).toEqual(server.rows[0]?.assessment)
  })

  it('judges a duplicate against its sample although it stands before it', () => {
    const { rows } = live({ '205 1': '0.2000', '205 2': '0.2', '206 1': '0.2100', '206 2': '0.2100' })
    const row = rows.find((each) => each.id === '206')
    expect(row?.live.qcPassed).toBe(true)
    expect(row?.live.qcText).toMatch(/^4\.\d % apart$/)
  })

  it('leaves slips of the hand out of the mean', () => {
    const clean = live({ '205 1': '0.2000' })
    const slip = live({ '205 1': '0.2000', '205 2': '0,2000' })
    expect(slip.rows[1]?.live).toEqual(clean.rows[1]?.live)
  })

  it('names every cell that is still empty', () => {
    const { missing, read, cells } = live({ '205 1': '0.2', '201 1': '0.0001', '201 2': '0,1' })
    expect(missing.map(({ row, columns }) => [row.position, columns])).toEqual([
      [1, ['2']],
      [5, ['2']],
      [6, ['1', '2']],
    ])
    expect([read, cells]).toEqual([2, 6])
  })

  it('finds what a reviewer must be told, with what was done about it', () => {
    const first = live({ '201 1': '0.0100', '201 2': '0.0102' })
    const failed = first.findings.find((finding) => finding.positionId === '201')
    expect(failed?.severity).toBe('failed')
    expect(failed && isUnanswered(failed)).toBe(true)
    const action = { kind: 'explained' as const, text: 'rinsed and read again', by: 'Ines Okafor', at: NOW }
    const kept = failed ? [{ ...failed, action }] : []
    const second = live({ '201 1': '0.0100', '201 2': '0.0102' }, [blank, sample], { findingsList: kept })
    const answered = second.findings.find((finding) => finding.positionId === '201')
    expect(answered?.action).toEqual(action)
    expect(answered && isUnanswered(answered)).toBe(false)
  })

  it('ages a saved reading by when it was read, an unsaved one by now', () => {
    const part = { colourStartedAt: '2026-12-01T10:12:00-05:00' }
    const read = aPosition({ readings: [aReading(1, '0.0821'), aReading(2, '0.0817')] })
    const early = (texts: Record<string, string>, rows = [read]) =>
      live(texts, rows, part).findings.filter((finding) => finding.id.startsWith('early'))
    // read at 10:15, three minutes after the reagent
    expect(early({})).toHaveLength(1)
    const unread = aPosition({})
    expect(
      live({ '205 1': '0.08' }, [unread], { colourStartedAt: '2026-12-01T10:05:00-05:00' }).findings,
    ).not.toContainEqual(expect.objectContaining({ id: 'early-205' }))
  })
})
