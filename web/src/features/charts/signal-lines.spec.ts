import { describe, expect, it } from 'vitest'
import type { ControlChartView } from './api/chart-queries'
import { chartWords, signalLines } from './signal-lines'

// constructed
const point = (day: number, value: number, signals: string[] = []) => ({
  at: `2026-11-0${day}T10:00:00Z`,
  value,
  batchId: String(day),
  label: `B-26-000${day}, position 3`,
  signals,
})
const chart: ControlChartView = {
  title: 'Control samples',
  unit: '%',
  center: 99.81234,
  upperAction: 106.5,
  lowerAction: 93.1,
  upperWarning: 104.3,
  lowerWarning: 95.3,
  points: [
    point(1, 107.64321, ['beyond an action limit', 'two of three beyond the same warning limit']),
    point(2, 99),
    point(3, 92, ['beyond an action limit']),
  ],
}

describe('signalLines', () => {
  it('lists what called out, newest first, in words', () => {
    expect(signalLines(chart).map((line) => [line.batchId, line.words])).toEqual([
      ['3', 'Beyond an action limit'],
      ['1', 'Beyond an action limit; two of three beyond the same warning limit'],
    ])
  })
})

describe('chartWords', () => {
  it('says limits and how many signals', () => {
    expect(chartWords(chart)).toBe('3 values, centre 99.8 %, action limits 93.1 to 106.5 %. 2 signals.')
  })
  it('says when there are too few values for limits', () => {
    expect(chartWords({ ...chart, center: null, points: [point(2, 99)] })).toBe(
      'One value; too few for limits.',
    )
  })
})
