import { expect, it } from 'vitest'
import type { WaitingDetermination } from '../api/batch-queries'
import { firstChoice, middleLevel } from './first-choice'

// constructed throughout
const waiting = (id: string, state: 'ok' | 'soon' | 'breached') =>
  ({ id, holding: { state, dueAt: '', remainingHours: 0, rule: '' } }) as WaitingDetermination

it('proposes as many as a batch holds, and nothing whose time has run out', () => {
  const rows = [waiting('1', 'breached'), waiting('2', 'soon'), waiting('3', 'ok'), waiting('4', 'ok')]
  expect(firstChoice(rows, 2)).toEqual(['2', '3'])
  expect(firstChoice(rows, 20)).toEqual(['2', '3', '4'])
})

it('verifies in the middle of the curve, with the level as it was written', () => {
  const standards = ['0.00', '0.10', '1.00', '4.00', '2.00'].map((concentration) => ({
    role: 'standard' as const,
    concentration,
    id: '1',
    position: 1,
    lotId: null,
    lotNumber: null,
    readings: [],
    leftOutReason: '',
  }))
  expect(middleLevel({ standards })).toBe('2.00')
  expect(middleLevel({ standards: [] })).toBe('')
})
